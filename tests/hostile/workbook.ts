import type { RawEntry } from './raw-zip';

const main = 'http://schemas.openxmlformats.org/spreadsheetml/2006/main';
const office = 'http://schemas.openxmlformats.org/officeDocument/2006/relationships';
const packageRelations = 'http://schemas.openxmlformats.org/package/2006/relationships';
const head = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n';

/** A cell of the clean workbook: number, text, or its own markup. */
export type CellMarkup = number | string | { readonly xml: string };

const letters = (column: number): string => String.fromCharCode(65 + column);

const cell = (value: CellMarkup, row: number, column: number): string => {
	const ref = `${letters(column)}${row}`;
	if (typeof value === 'number') return `<c r="${ref}"><v>${value}</v></c>`;
	if (typeof value === 'string') return `<c r="${ref}" t="inlineStr"><is><t>${value}</t></is></c>`;
	return value.xml.replaceAll('REF', ref);
};

/** Rows as sheet data, starting in row 1. */
export const sheetData = (rows: readonly (readonly CellMarkup[])[]): string =>
	`<sheetData>${rows
		.map((cells, i) => `<row r="${i + 1}">${cells.map((value, j) => cell(value, i + 1, j)).join('')}</row>`)
		.join('')}</sheetData>`;

export const sheet = (inside: string): string => `${head}<worksheet xmlns="${main}">${inside}</worksheet>`;

/** Day number of the 1900 system with the date style of the clean workbook. */
export const dated = (serial: number): CellMarkup => ({ xml: `<c r="REF" s="1"><v>${serial}</v></c>` });

/** Quarters 2020-Q1 to 2021-Q2 by their first day, with two columns. */
export const cleanRows: readonly (readonly CellMarkup[])[] = [
	['date', 'loss', 'rate'],
	[dated(43831), 1.5, 0.25],
	[dated(43922), 1.75, 0.5],
	[dated(44013), 2.125, 0.25],
	[dated(44105), 2, 1.5],
	[dated(44197), 1.25, 1.75],
	[dated(44287), 1.375, 2]
];

export const cleanSheet = sheet(sheetData(cleanRows));

/** Replaces one cell of the clean rows; row and column count from 1. */
export const withCell = (
	row: number,
	column: number,
	value: CellMarkup
): readonly (readonly CellMarkup[])[] =>
	cleanRows.map((cells, i) =>
		i === row - 1 ? cells.map((old, j) => (j === column - 1 ? value : old)) : cells
	);

export interface Book {
	readonly sheets?: readonly { readonly name: string; readonly xml: string; readonly state?: string }[];
	readonly sharedStrings?: readonly string[];
	readonly dates1904?: boolean;
	/** More parts, or parts put in place of those made here. */
	readonly parts?: Readonly<Record<string, string | Uint8Array>>;
	readonly relations?: string;
	readonly types?: string;
}

const relation = (id: string, kind: string, target: string): string =>
	`<Relationship Id="${id}" Type="${office}/${kind}" Target="${target}"/>`;

/** The parts of a small clean workbook, in the order of the archive. */
export const bookParts = ({
	sheets = [{ name: 'Data', xml: cleanSheet }],
	sharedStrings,
	dates1904 = false,
	parts = {},
	relations = '',
	types = ''
}: Book = {}): readonly RawEntry[] => {
	const shared = sharedStrings ? relation('rId90', 'sharedStrings', 'sharedStrings.xml') : '';
	const made: Record<string, string | Uint8Array> = {
		'[Content_Types].xml': `${head}<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="xml" ContentType="application/xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/>${types}</Types>`,
		'_rels/.rels': `${head}<Relationships xmlns="${packageRelations}">${relation('rId1', 'officeDocument', 'xl/workbook.xml')}</Relationships>`,
		'xl/workbook.xml': `${head}<workbook xmlns="${main}" xmlns:r="${office}">${dates1904 ? '<workbookPr date1904="1"/>' : ''}<sheets>${sheets
			.map(
				({ name, state }, i) =>
					`<sheet name="${name}" sheetId="${i + 1}"${state ? ` state="${state}"` : ''} r:id="rId${i + 1}"/>`
			)
			.join('')}</sheets></workbook>`,
		'xl/_rels/workbook.xml.rels': `${head}<Relationships xmlns="${packageRelations}">${sheets
			.map((_, i) => relation(`rId${i + 1}`, 'worksheet', `worksheets/sheet${i + 1}.xml`))
			.join('')}${relation('rId80', 'styles', 'styles.xml')}${shared}${relations}</Relationships>`,
		'xl/styles.xml': `${head}<styleSheet xmlns="${main}"><fonts count="1"><font/></fonts><fills count="1"><fill/></fills><borders count="1"><border/></borders><cellStyleXfs count="1"><xf/></cellStyleXfs><cellXfs count="3"><xf numFmtId="0"/><xf numFmtId="14" applyNumberFormat="1"/><xf numFmtId="2" applyNumberFormat="1"/></cellXfs></styleSheet>`,
		...Object.fromEntries(sheets.map(({ xml }, i) => [`xl/worksheets/sheet${i + 1}.xml`, xml])),
		...(sharedStrings
			? {
					'xl/sharedStrings.xml': `${head}<sst xmlns="${main}" count="${sharedStrings.length}" uniqueCount="${sharedStrings.length}">${sharedStrings.map((text) => `<si><t>${text}</t></si>`).join('')}</sst>`
				}
			: {}),
		...parts
	};
	return Object.entries(made).map(([name, data]) => ({ name, data }));
};
