/** What kind of text is judged: a `name` is one line without direction marks; `long` text may hold \n, \t and marks. */
export type TextKind = 'name' | 'long';

// eslint-disable-next-line no-control-regex -- control characters are what is looked for
const controls = { name: /[\u0000-\u001f\u007f-\u009f]/, long: /[\u0000-\u0008\u000b-\u001f\u007f-\u009f]/ };
/** Marks that reorder what is shown (Unicode UAX 9), so that a name could read as another. */
const direction = /[\u202a-\u202e\u2066-\u2069\u200e\u200f]/;

const codePoint = (text: string, at: number): string =>
	`U+${text.codePointAt(at)!.toString(16).toUpperCase().padStart(4, '0')}`;

/**
 * Says what is wrong with a text, naming the position (1-based, in UTF-16 units), or undefined when nothing is:
 * well-formed UTF-16, Unicode form NFC, no control characters; in names no direction marks either.
 */
export const textFault = (text: string, kind: TextKind): string | undefined => {
	// Most texts: nothing to look for in printable ASCII.
	if (/^[ -~]*$/.test(text)) return undefined;
	const control = text.search(controls[kind]);
	if (control >= 0)
		return `holds the control character ${codePoint(text, control)} at position ${control + 1}`;
	if (!text.isWellFormed()) return 'holds half of a surrogate pair';
	if (text.normalize('NFC') !== text) return 'is not in Unicode form NFC';
	if (kind === 'long') return undefined;
	const mark = text.search(direction);
	return mark < 0 ? undefined : `holds the direction mark ${codePoint(text, mark)} at position ${mark + 1}`;
};
