import { reject } from './rejected';

export type Media = 'csv' | 'xlsx';

const latin1 = (bytes: Uint8Array): string =>
	Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length).toString('latin1');

const binaries: readonly (readonly [prefix: string, name: string])[] = [
	['%PDF', 'a PDF document'],
	['\x89PNG', 'a PNG picture'],
	['\xff\xd8\xff', 'a JPEG picture'],
	['GIF8', 'a GIF picture'],
	['\x1f\x8b', 'a gzip archive'],
	['7z\xbc\xaf\x27\x1c', 'a 7z archive'],
	['Rar!', 'a RAR archive'],
	['PAR1', 'a Parquet file'],
	['MZ', 'a program'],
	['\x7fELF', 'a program'],
	['SQLite format 3', 'a database file'],
	['BZh', 'a bzip2 archive'],
	['\xfd7zXZ', 'an xz archive']
];

const markup: readonly (readonly [start: RegExp, name: string])[] = [
	[/^<!doctype html|^<html|^<table|^<body|^<div/i, 'an HTML page'],
	[/^<\?xml|^<\w+[\s>:]/i, 'an XML file'],
	[/^\{\\rtf/, 'an RTF document'],
	[/^[{[][\s\S]*["{[\d]/, 'a JSON file'],
	[/^%!PS/, 'a PostScript file'],
	[/^#!/, 'a program']
];

/** Names of a zip's central directory, as bytes spell them; the strict reading comes later. */
const zipKind = (bytes: Uint8Array): Media | undefined => {
	const text = latin1(bytes);
	const holds = (name: string): boolean => text.includes(name);
	if (holds('[Content_Types].xml') && holds('xl/workbook.xml')) return 'xlsx';
	if (holds('xl/workbook.bin')) return reject('not-a-table', ['a binary workbook (.xlsb)']);
	if (holds('application/vnd.oasis.opendocument')) return reject('not-a-table', ['an OpenDocument file']);
	if (holds('word/document.xml')) return reject('not-a-table', ['a text document (.docx)']);
	if (holds('Index/Document.iwa') || holds('index.apxl'))
		return reject('not-a-table', ['a Numbers document']);
	return undefined;
};

/**
 * What a file is, by its content; its name and the browser's word are not asked.
 * @throws Rejected `empty`, `not-a-table` or `encrypted`.
 */
export const detect = (bytes: Uint8Array): Media => {
	if (bytes.length === 0) reject('empty', []);
	const head = latin1(bytes.subarray(0, 512));
	if (head.startsWith('PK\x03\x04') || head.startsWith('PK\x05\x06'))
		return zipKind(bytes) ?? reject('not-a-table', ['a zip archive without a workbook']);
	if (head.startsWith('\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1')) {
		const name = Buffer.from('EncryptedPackage', 'utf16le').toString('latin1');
		if (latin1(bytes).includes(name)) reject('encrypted', []);
		reject('not-a-table', ['an old workbook (.xls)']);
	}
	for (const [prefix, name] of binaries) {
		// Two letters are a program only where binary follows: a CSV may name its first column MZ.
		if (head.startsWith(prefix) && (prefix !== 'MZ' || head.includes('\0'))) reject('not-a-table', [name]);
	}
	const text = head.replace(/^\xef\xbb\xbf/, '').trimStart();
	for (const [start, name] of markup) if (start.test(text)) reject('not-a-table', [name]);
	return 'csv';
};
