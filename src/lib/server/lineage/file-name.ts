import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';

const longest = 120;

/** Marks that turn the order of letters around, so that a name reads as another (Unicode UAX 9). */
const direction = /[\u200e\u200f\u202a-\u202e\u2066-\u2069]/;

/**
 * A file's name as it may be shown: base name, NFC, without control and zero-width characters, 120 characters at most.
 * It is text for people only and never becomes a path.
 */
export const shownFileName = (given: string): { name: string } | { issue: UploadIssue } => {
	if (given.includes('\0') || direction.test(given)) {
		const seen = given.replace(/[^\P{C}]/gu, '\ufffd').slice(0, longest);
		return { issue: uploadIssue('file-name', [seen], { pointer: '/name' }) };
	}
	const base = given.split(/[/\\]/).at(-1) ?? '';
	const clean = base
		.toWellFormed()
		.normalize('NFC')
		.replace(/[\p{Cc}\u200b-\u200d\u2060\ufeff]/gu, '')
		.trim();
	return { name: [...clean].slice(0, longest).join('') || 'upload' };
};
