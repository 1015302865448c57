import { rawZip, type RawEntry, type RawZip } from './raw-zip';
import type { Case, Expected } from './case';
import {
	bookParts,
	cleanRows,
	cleanSheet,
	dated,
	sheet,
	sheetData,
	withCell,
	type Book,
	type CellMarkup
} from './workbook';

const accepted = (expected: Omit<Expected, 'verdict'> = {}): Expected => ({ verdict: 'A', ...expected });
const refused = (
	code: NonNullable<Expected['code']>,
	expected: Omit<Expected, 'verdict' | 'code'> = {}
): Expected => ({
	verdict: 'R',
	code,
	...expected
});
const book = (name: string, content: Book, expected: Expected): Case => ({
	name,
	bytes: rawZip(bookParts(content)),
	expected
});
const ofSheet = (name: string, xml: string, expected: Expected): Case =>
	book(name, { sheets: [{ name: 'Data', xml }] }, expected);
const ofRows = (name: string, rows: readonly (readonly CellMarkup[])[], expected: Expected): Case =>
	ofSheet(name, sheet(sheetData(rows)), expected);
/** The clean workbook with its archive told otherwise. */
const zip = (
	name: string,
	change: (parts: readonly RawEntry[]) => readonly RawEntry[],
	expected: Expected,
	raw: RawZip = {}
): Case => ({
	name,
	bytes: rawZip(change(bookParts()), raw),
	expected
});
const first = [1.5, 1.75, 2.125];
const formula = (inside: string): CellMarkup => ({ xml: `<c r="REF">${inside}</c>` });
const sheetPart = 'xl/worksheets/sheet1.xml';

const sheets: readonly Case[] = [
	ofRows('00-clean.xlsx', cleanRows, accepted({ notes: ['full-precision'], figures: first })),
	book(
		'31-system-1904.xlsx',
		{
			dates1904: true,
			sheets: [
				{
					name: 'Data',
					xml: sheet(
						sheetData(
							cleanRows.map((cells, i) =>
								i === 0 ? cells : [dated(42369 + Math.round((i - 1) * 91.4)), ...cells.slice(1)]
							)
						)
					)
				}
			]
		},
		accepted({ figures: first })
	),
	ofRows('31-day-that-never-was.xlsx', withCell(2, 1, dated(60)), refused('date', { row: 2 })),
	ofRows(
		'31-day-numbers.xlsx',
		cleanRows.map((cells, i) => (i === 0 ? cells : [43831 + 91 * i, ...cells.slice(1)])),
		refused('looks-like-serials', { row: 2 })
	),
	ofRows('32-time.xlsx', withCell(3, 1, dated(43922.5)), refused('time', { row: 3 })),
	ofRows(
		'48-formulas.xlsx',
		withCell(3, 2, formula('<f>B2+0.25</f><v>1.75</v>')),
		accepted({ notes: ['formulas'], figures: first })
	),
	ofRows(
		'48-formula-without-value.xlsx',
		withCell(3, 2, formula('<f>B2+0.25</f>')),
		refused('no-value', { row: 3 })
	),
	ofRows(
		'48-cell-error.xlsx',
		withCell(4, 2, { xml: '<c r="REF" t="e"><v>#REF!</v></c>' }),
		refused('cell-error', { row: 4 })
	),
	ofRows(
		'48-not-available.xlsx',
		withCell(3, 2, { xml: '<c r="REF" t="e"><v>#N/A</v></c>' }),
		accepted({ notes: ['inner-missing'], figures: [1.5, null] })
	),
	ofSheet(
		'49-merged.xlsx',
		sheet(
			`${sheetData([['Losses', '', ''], ...cleanRows])}<mergeCells count="1"><mergeCell ref="A1:C1"/></mergeCells>`
		),
		refused('layout', { row: 1 })
	),
	book(
		'49-merged-range-chosen.xlsx',
		{
			sheets: [
				{
					name: 'Data',
					xml: sheet(
						`${sheetData([['Losses of households', '', ''], ...cleanRows])}<mergeCells count="1"><mergeCell ref="A1:C1"/></mergeCells>`
					)
				}
			]
		},
		accepted({ choices: { headerRow: 2, range: 'A2:C8' }, figures: first })
	),
	ofRows('49-title.xlsx', [['Losses of the portfolio'], ...cleanRows], refused('layout', { row: 1 })),
	ofRows(
		'49-two-header-rows.xlsx',
		[cleanRows[0]!, ['period', 'per cent', 'per cent'], ...cleanRows.slice(1)],
		refused('layout', { row: 2 })
	),
	ofSheet(
		'50-hidden.xlsx',
		sheet(
			`<cols><col min="3" max="3" hidden="1"/></cols>${sheetData(cleanRows).replace('<row r="4">', '<row r="4" hidden="1">')}<autoFilter ref="A1:C7"/>`
		),
		accepted({ notes: ['hidden', 'filtered'], figures: first })
	),
	book(
		'50-very-hidden-sheet.xlsx',
		{ sheets: [{ name: 'Data', xml: cleanSheet, state: 'veryHidden' }] },
		accepted({ notes: ['hidden'], figures: first })
	),
	book(
		'50-two-sheets.xlsx',
		{
			sheets: [
				{ name: 'Notes', xml: sheet(sheetData([['x']])) },
				{ name: 'Data', xml: cleanSheet }
			]
		},
		refused('sheet')
	),
	book(
		'50-sheet-chosen.xlsx',
		{
			sheets: [
				{ name: 'Notes', xml: sheet(sheetData([['y']])) },
				{ name: 'Data', xml: cleanSheet }
			]
		},
		accepted({ choices: { sheet: 'Data' }, figures: first })
	),
	ofRows(
		'51-numbers-as-text.xlsx',
		withCell(2, 2, '1.5'),
		accepted({ notes: ['text-numbers'], figures: first })
	),
	ofRows(
		'51-truth-value.xlsx',
		withCell(2, 2, { xml: '<c r="REF" t="b"><v>1</v></c>' }),
		refused('number', { row: 2, column: 'loss' })
	),
	book(
		'51-shared-strings.xlsx',
		{
			sharedStrings: ['date', 'loss'],
			sheets: [
				{ name: 'Data', xml: sheet(sheetData(withCell(1, 2, { xml: '<c r="REF" t="s"><v>1</v></c>' }))) }
			]
		},
		accepted({ figures: first })
	),
	book(
		'51-string-out-of-range.xlsx',
		{
			sharedStrings: ['date', 'loss'],
			sheets: [
				{ name: 'Data', xml: sheet(sheetData(withCell(1, 2, { xml: '<c r="REF" t="s"><v>2</v></c>' }))) }
			]
		},
		refused('corrupt')
	),
	book(
		'51-string-negative.xlsx',
		{
			sharedStrings: ['date', 'loss'],
			sheets: [
				{ name: 'Data', xml: sheet(sheetData(withCell(1, 2, { xml: '<c r="REF" t="s"><v>-1</v></c>' }))) }
			]
		},
		refused('corrupt')
	),
	ofRows(
		'52-rounded-by-format.xlsx',
		withCell(2, 2, { xml: '<c r="REF" s="2"><v>1.4999999</v></c>' }),
		accepted({ notes: ['full-precision'], figures: [1.4999999] })
	),
	book('53-macros.xlsx', { parts: { 'xl/vbaProject.bin': 'code' } }, refused('macros')),
	book(
		'53-macro-type.xlsx',
		{
			types:
				'<Override PartName="/xl/other.xml" ContentType="application/vnd.ms-excel.sheet.macroEnabled.main+xml"/>'
		},
		refused('macros')
	),
	book('53-embedded-object.xlsx', { parts: { 'xl/embeddings/oleObject1.bin': 'object' } }, refused('macros')),
	book(
		'53-external-link.xlsx',
		{
			parts: {
				'xl/externalLinks/externalLink1.xml':
					'<externalLink xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"/>'
			}
		},
		accepted({ notes: ['not-followed'], figures: first })
	),
	book(
		'53-query.xlsx',
		{
			parts: {
				'xl/connections.xml':
					'<connections xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"/>'
			}
		},
		accepted({ notes: ['not-followed'], figures: first })
	)
];

const end = (bytes: Buffer): Buffer => bytes.subarray(bytes.length - 22);

const archives: readonly Case[] = [
	{
		name: '54-open-document.xlsx',
		bytes: rawZip([{ name: 'mimetype', data: 'application/vnd.oasis.opendocument.spreadsheet', method: 0 }]),
		expected: refused('not-a-table')
	},
	{
		name: '54-binary-workbook.xlsx',
		bytes: rawZip([{ name: 'xl/workbook.bin', data: 'x' }]),
		expected: refused('not-a-table')
	},
	{
		name: '54-text-document.xlsx',
		bytes: rawZip([{ name: 'word/document.xml', data: '<x/>' }]),
		expected: refused('not-a-table')
	},
	zip(
		'55-encryption-bit.xlsx',
		(parts) => parts.map((part) => ({ ...part, flags: 1 })),
		refused('encrypted')
	),
	zip(
		'56-declared-huge.xlsx',
		(parts) => [...parts, { name: 'xl/media/a.bin', data: 'x', size: 0xfffffff0 }],
		refused('unpacks-too-large')
	),
	zip(
		'56-many-parts.xlsx',
		(parts) => [...parts, ...Array.from({ length: 600 }, (_, i) => ({ name: `p${i}`, data: '', method: 0 }))],
		refused('unpacks-too-large')
	),
	zip(
		'57-overlap.xlsx',
		(parts) => [...parts, { name: 'xl/again.xml', data: cleanSheet, offset: 0 }],
		refused('corrupt-zip')
	),
	zip(
		'57-name-twice.xlsx',
		(parts) => [...parts, { name: 'XL/Workbook.xml', data: '<x/>' }],
		refused('corrupt-zip')
	),
	zip(
		'57-two-names.xlsx',
		(parts) =>
			parts.map((part) =>
				part.name === sheetPart ? { ...part, localName: 'xl/worksheets/sheet9.xml' } : part
			),
		refused('corrupt-zip')
	),
	zip(
		'57-size-too-small.xlsx',
		(parts) => parts.map((part) => (part.name === sheetPart ? { ...part, size: 20 } : part)),
		refused('corrupt-zip')
	),
	zip(
		'57-size-too-large.xlsx',
		(parts) => parts.map((part) => (part.name === sheetPart ? { ...part, size: 9000 } : part)),
		refused('corrupt-zip')
	),
	zip(
		'57-local-size.xlsx',
		(parts) => parts.map((part) => (part.name === sheetPart ? { ...part, localSize: 7 } : part)),
		refused('corrupt-zip')
	),
	zip(
		'57-check-sum.xlsx',
		(parts) => parts.map((part) => (part.name === sheetPart ? { ...part, crc: 1 } : part)),
		refused('corrupt-zip')
	),
	zip('57-data-behind.xlsx', (parts) => parts, refused('corrupt-zip'), { suffix: Buffer.from('trailing') }),
	zip('57-comment.xlsx', (parts) => parts, refused('corrupt-zip'), { comment: 'hello' }),
	zip('57-two-end-records.xlsx', (parts) => parts, refused('corrupt-zip'), { suffix: end(rawZip([])) }),
	zip('57-prefix.xlsx', (parts) => parts, refused('corrupt-zip'), {
		prefix: Buffer.from('PK\x03\x04 self-extracting ')
	}),
	zip(
		'57-gap.xlsx',
		(parts) => parts.map((part, i) => (i === 1 ? { ...part, gap: Buffer.from('hidden') } : part)),
		refused('corrupt-zip')
	),
	zip(
		'57-64-bit.xlsx',
		(parts) => parts.map((part, i) => (i === 1 ? { ...part, size: 0xffffffff } : part)),
		refused('corrupt-zip')
	),
	zip(
		'57-method-12.xlsx',
		(parts) => parts.map((part, i) => (i === 1 ? { ...part, method: 12 } : part)),
		refused('corrupt-zip')
	),
	zip('57-count.xlsx', (parts) => parts, refused('corrupt-zip'), { count: 3 }),
	zip(
		'58-parent-folder.xlsx',
		(parts) => [...parts, { name: '../evil.xml', data: '<x/>' }],
		refused('corrupt-zip')
	),
	zip('58-root.xlsx', (parts) => [...parts, { name: '/etc/evil', data: 'x' }], refused('corrupt-zip')),
	zip('58-drive.xlsx', (parts) => [...parts, { name: 'C:\\evil', data: 'x' }], refused('corrupt-zip')),
	zip('58-nul.xlsx', (parts) => [...parts, { name: 'evil\0.xml', data: 'x' }], refused('corrupt-zip')),
	zip(
		'58-long-name.xlsx',
		(parts) => [...parts, { name: 'n'.repeat(60_000), data: 'x' }],
		refused('corrupt-zip')
	),
	zip(
		'58-link.xlsx',
		(parts) => [...parts, { name: 'link', data: '/etc/passwd', externalAttributes: 0xa1ff0000 }],
		refused('corrupt-zip')
	)
];

const main = 'http://schemas.openxmlformats.org/spreadsheetml/2006/main';
const withDtd = (declaration: string): string => cleanSheet.replace('<worksheet', `${declaration}<worksheet`);

const markup: readonly Case[] = [
	ofSheet('59-document-type.xlsx', withDtd('<!DOCTYPE worksheet>'), refused('xml-dtd')),
	ofSheet(
		'59-entities.xlsx',
		withDtd('<!DOCTYPE x [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;"><!ENTITY c "&b;&b;&b;&b;">]>'),
		refused('xml-dtd')
	),
	ofSheet(
		'59-external-entity.xlsx',
		withDtd('<!DOCTYPE x [<!ENTITY e SYSTEM "file:///etc/passwd">]>'),
		refused('xml-dtd')
	),
	ofSheet(
		'59-parameter-entity.xlsx',
		withDtd('<!DOCTYPE x [<!ENTITY % p SYSTEM "http://127.0.0.1:9/x"> %p;]>'),
		refused('xml-dtd')
	),
	ofSheet(
		'59-inclusion.xlsx',
		cleanSheet.replace(
			'<sheetData>',
			'<xi:include xmlns:xi="http://www.w3.org/2001/XInclude" href="x"/><sheetData>'
		),
		refused('xml-dtd')
	),
	ofSheet(
		'59-style-sheet.xlsx',
		withDtd('<?xml-stylesheet type="text/xsl" href="x.xsl"?>'),
		refused('xml-dtd')
	),
	book('59-unread-part.xlsx', { parts: { 'docProps/app.xml': '<!DOCTYPE x><x/>' } }, refused('xml-dtd')),
	ofSheet('60-depth.xlsx', sheet(`${'<a>'.repeat(5000)}${'</a>'.repeat(5000)}`), refused('xml')),
	ofSheet(
		'60-attributes.xlsx',
		cleanSheet.replace(
			'<sheetData',
			`<x ${Array.from({ length: 300 }, (_, i) => `a${i}="1"`).join(' ')}/><sheetData`
		),
		refused('xml')
	),
	ofSheet('60-cut.xlsx', cleanSheet.slice(0, -30), refused('xml')),
	ofSheet(
		'60-namespace.xlsx',
		cleanSheet.replace('<worksheet', '<other').replace('</worksheet', '</other'),
		refused('xml')
	),
	book(
		'60-workbook-namespace.xlsx',
		{ parts: { 'xl/workbook.xml': '<workbook xmlns="urn:other"><sheets/></workbook>' } },
		refused('xml')
	),
	ofSheet('60-utf-7.xlsx', cleanSheet.replace('UTF-8', 'UTF-7'), refused('xml')),
	ofSheet('60-two-roots.xlsx', `${cleanSheet}<worksheet xmlns="${main}"/>`, refused('xml')),
	ofSheet('60-unclosed.xlsx', cleanSheet.replace('</row>', ''), refused('xml')),
	ofSheet('60-unknown-entity.xlsx', cleanSheet.replace('loss', '&nbsp;'), refused('xml')),
	book(
		'61-no-sheet-part.xlsx',
		{
			relations: '',
			parts: {
				'xl/_rels/workbook.xml.rels':
					'<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/worksheet" Target="worksheets/none.xml"/></Relationships>'
			}
		},
		refused('corrupt')
	),
	book(
		'61-no-relationship.xlsx',
		{
			parts: {
				'xl/_rels/workbook.xml.rels':
					'<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"/>'
			}
		},
		refused('corrupt')
	),
	ofSheet(
		'61-lying-dimension.xlsx',
		cleanSheet.replace('<sheetData>', '<dimension ref="A1:XFD1048576"/><sheetData>'),
		accepted({ figures: first })
	),
	ofSheet('61-cell-nowhere.xlsx', cleanSheet.replace('r="B2"', 'r="ZZZZ9"'), refused('corrupt')),
	ofSheet('61-row-zero.xlsx', cleanSheet.replace('<row r="2">', '<row r="0">'), refused('corrupt')),
	ofSheet('61-rows-out-of-order.xlsx', cleanSheet.replace('<row r="5">', '<row r="2">'), refused('corrupt')),
	ofSheet('61-cell-twice.xlsx', cleanSheet.replace('r="C3"', 'r="B3"'), refused('corrupt')),
	ofSheet(
		'61-far-style.xlsx',
		cleanSheet.replace('</sheetData>', '<row r="1048576"><c r="XFD1048576" s="1"/></row></sheetData>'),
		accepted({ figures: first })
	)
];

/** Workbooks and archives, made from one clean workbook. */
export const workbookFiles: readonly Case[] = [...sheets, ...archives, ...markup];
