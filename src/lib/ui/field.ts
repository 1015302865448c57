/** What ties a control to its label, hint and error. */
export interface FieldAttributes {
	readonly id: string;
	readonly name: string;
	readonly 'aria-describedby'?: string | undefined;
	readonly 'aria-invalid'?: 'true' | undefined;
}

/** What every field of a form may carry beside its control. */
export interface FieldProps {
	readonly name: string;
	readonly label: string;
	/** What belongs here and in which form. */
	readonly hint?: string | undefined;
	/** What is wrong and how to mend it. */
	readonly error?: string | readonly string[] | undefined;
	readonly optional?: boolean | undefined;
}

/** The id of a field's control; error summaries link to it. */
export function fieldId(name: string): string {
	return `field-${name.replace(/[^A-Za-z0-9_-]+/g, '-')}`;
}

/** All messages of a field as one text; empty when it is in order. */
export function errorText(error: FieldProps['error']): string {
	return typeof error === 'string' ? error : (error ?? []).join(' ');
}

/** Attributes for the control of a field with this hint and error. */
export function fieldAttributes({ name, hint, error }: FieldProps): FieldAttributes {
	const id = fieldId(name);
	const wrong = errorText(error) !== '';
	const describedBy = [hint ? `${id}-hint` : '', wrong ? `${id}-error` : ''].filter(Boolean).join(' ');
	return {
		id,
		name,
		'aria-describedby': describedBy || undefined,
		'aria-invalid': wrong ? 'true' : undefined
	};
}
