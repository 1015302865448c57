import { commonWords } from './common-words';

const words = new Set(commonWords);

/** Figures and marks that stand for letters. */
const letters: Readonly<Record<string, string>> = {
	'0': 'o',
	'1': 'i',
	'3': 'e',
	'4': 'a',
	'5': 's',
	'7': 't',
	'8': 'b',
	'@': 'a',
	$: 's',
	'!': 'i',
	'€': 'e',
	'+': 't'
};

const asLetters = (text: string): string => [...text].map((c) => letters[c] ?? c).join('');

/** Neighbours on a keyboard, in the alphabet and among the figures, forwards and backwards. */
const rows = [
	'qwertyuiop',
	'asdfghjkl',
	'zxcvbnm',
	'qwertzuiop',
	'yxcvbnm',
	'azertyuiop',
	'qsdfghjklm',
	'1234567890',
	'0123456789',
	'abcdefghijklmnopqrstuvwxyz',
	'qazwsxedcrfvtgbyhnujmikolp',
	'1qaz2wsx3edc4rfv5tgb6yhn7ujm'
];
const runs = [...rows, ...rows.map((row) => [...row].reverse().join(''))].map((row) => row + row);

/** Length of the longest piece from `at` that is a run of neighbours or one repeated character. */
const runAt = (text: string, at: number): number => {
	let longest = 1;
	while (text[at + longest] === text[at]) longest += 1;
	for (const row of runs) {
		let length = 3;
		while (at + length <= text.length && row.includes(text.slice(at, at + length))) length += 1;
		longest = Math.max(longest, length - 1);
	}
	return longest;
};

const years = /^(?:19|20)\d\d/;

/** Length of the longest common word at a place, also when figures stand for its letters; 0 where there is none. */
const wordAt = (text: string, plain: string, at: number): number => {
	for (let length = Math.min(14, text.length - at); length >= 3; length--)
		if (words.has(text.slice(at, at + length)) || words.has(plain.slice(at, at + length))) return length;
	return 0;
};

/**
 * Different pieces a guesser would put together: common words, keyboard runs, years, repeated characters; what fits
 * none is a piece a character, and a piece that comes again costs nothing.
 */
const pieces = (text: string): number => {
	const plain = asLetters(text);
	const found = new Set<string>();
	for (let at = 0; at < text.length;) {
		const run = runAt(text, at);
		const year = years.test(text.slice(at)) ? 4 : 0;
		const length = Math.max(1, wordAt(text, plain, at), year, run >= 3 ? run : 0);
		found.add(plain.slice(at, (at += length)));
	}
	return found.size;
};

/** Four or more different pieces are taken; a sentence of four words has them. */
const leastPieces = 4;

/**
 * Whether a password, in lower case, is one that is tried first: a common word, run, year or repetition, or two or
 * three of them joined. The rules stand for lists of millions of joined forms that a file could not hold.
 */
export const isCommon = (password: string): boolean => {
	const text = password.replace(/[\s\-_.,;:#*/\\]+/g, '');
	return new Set(text).size < 5 || pieces(text) < leastPieces;
};
