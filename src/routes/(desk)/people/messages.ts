/** superforms' errors as one list, each tied to its field; what names no field stands for the form. */
export const messagesOf = (errors: unknown): { field: string; message: string }[] => {
	if (typeof errors !== 'object' || errors === null) return [];
	return Object.entries(errors).flatMap(([name, said]) => {
		const messages = Array.isArray(said) ? (said as unknown[]) : [];
		const field = name.startsWith('_') ? '' : name;
		return messages.filter((message) => typeof message === 'string').map((message) => ({ field, message }));
	});
};
