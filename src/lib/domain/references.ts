/** References that people say aloud: a letter and a number, padded, with `/n` for a version or vintage. */
const kinds = {
	model: { letter: 'M', digits: 3 },
	dataset: { letter: 'D', digits: 4 },
	run: { letter: 'R', digits: 4 },
	validation: { letter: 'V', digits: 4 },
	question: { letter: 'Q', digits: 4 },
	finding: { letter: 'F', digits: 4 }
} as const;

export type ReferenceKind = keyof typeof kinds;

const pattern = (kind: ReferenceKind): string => {
	const { letter, digits } = kinds[kind];
	// A longer number carries no leading zero, so that one thing has one name.
	return `${letter}-(?:\\d{${digits}}|[1-9]\\d{${digits},8})`;
};

const whole = (source: string): RegExp => new RegExp(`^${source}$`);

/** The strict form of each reference. */
export const forms = {
	model: whole(pattern('model')),
	version: whole(`${pattern('model')}/[1-9]\\d{0,5}`),
	dataset: whole(pattern('dataset')),
	vintage: whole(`${pattern('dataset')}/[1-9]\\d{0,5}`),
	run: whole(pattern('run')),
	validation: whole(pattern('validation')),
	question: whole(pattern('question')),
	finding: whole(pattern('finding')),
	entry: /^E-(?:0|[1-9]\d{0,15})$/
} as const;

/** `reference('model', 14)` is `M-014`. */
export const reference = (kind: ReferenceKind, number: number): string =>
	`${kinds[kind].letter}-${String(number).padStart(kinds[kind].digits, '0')}`;

/** `part('M-014', 3)` is `M-014/3`: a version of a model, a vintage of a dataset. */
export const part = (ref: string, number: number): string => `${ref}/${number}`;

/** `M-014/3` and `M-014` both give `M-014`. */
export const parent = (ref: string): string => ref.split('/')[0]!;

/** `M-014/3` gives 3, `M-014` gives 14. */
export const ordinal = (ref: string): number => Number(ref.slice(ref.search(/[^/-]+$/)));
