/** Decodes base64url without padding; undefined unless encoding it again gives the same text. */
export const strictBase64url = (text: string): Buffer | undefined => {
	if (!/^[A-Za-z0-9_-]*$/.test(text)) return undefined;
	const bytes = Buffer.from(text, 'base64url');
	return bytes.toString('base64url') === text ? bytes : undefined;
};
