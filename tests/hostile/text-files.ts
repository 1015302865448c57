import type { Case, Expected } from './case';

const utf8 = (text: string): Buffer => Buffer.from(text, 'utf8');
const join = (...pieces: (string | readonly number[])[]): Buffer =>
	Buffer.concat(pieces.map((piece) => (typeof piece === 'string' ? utf8(piece) : Buffer.from(piece))));

const accepted = (expected: Omit<Expected, 'verdict'> = {}): Expected => ({ verdict: 'A', ...expected });
const refused = (
	code: NonNullable<Expected['code']>,
	expected: Omit<Expected, 'verdict' | 'code'> = {}
): Expected => ({
	verdict: 'R',
	code,
	...expected
});

const quarters = ['2020Q1', '2020Q2', '2020Q3', '2020Q4', '2021Q1', '2021Q2'];
/** A table of one column over quarters; `cells` stand in the first rows, the rest is filled. */
const column = (name: string, cells: readonly string[], separator = ','): string =>
	[
		`date${separator}${name}`,
		...quarters.map((quarter, i) => `${quarter}${separator}${cells[i] ?? i + 11}`)
	].join('\n') + '\n';
/** A table over these periods. */
const over = (periods: readonly string[]): string =>
	['date,a', ...periods.map((period, i) => `${period},${(i + 1) ** 2}`)].join('\n') + '\n';

const make = (name: string, content: string | Buffer, expected: Expected): Case => ({
	name,
	bytes: typeof content === 'string' ? utf8(content) : content,
	expected
});

const shape: readonly Case[] = [
	make('01-empty.csv', '', refused('empty')),
	make('01-only-bom.csv', join([0xef, 0xbb, 0xbf]), refused('empty')),
	make('01-blank-lines.csv', '\n\r\n  \n', refused('empty')),
	make('02-header-only.csv', 'date,a,b\n', refused('no-data')),
	make('02-one-row.csv', 'date,a\n2020Q1,1\n', refused('too-short')),
	make(
		'03-no-header.csv',
		'2020Q1,1,2\n2020Q2,2,3\n2020Q3,3,4\n2020Q4,4,5\n',
		refused('no-header', { row: 1 })
	),
	make(
		'03-no-header-said.csv',
		'2020Q1,1,2\n2020Q2,4,3\n2020Q3,3,4\n2020Q4,4,9\n',
		accepted({ choices: { headerRow: 0 }, figures: [1, 4] })
	),
	make(
		'04-column-twice.csv',
		'date,a,a\n2020Q1,1,2\n2020Q2,1,2\n2020Q3,1,3\n2020Q4,1,2\n',
		refused('column-twice')
	),
	make(
		'04-column-twice-case.csv',
		'date,GDP, gdp \n2020Q1,1,2\n2020Q2,1,2\n2020Q3,1,3\n2020Q4,1,2\n',
		refused('column-twice')
	),
	make(
		'04-column-twice-width.csv',
		'date,GDP,ＧＤＰ\n2020Q1,1,2\n2020Q2,1,2\n2020Q3,1,3\n2020Q4,1,2\n',
		refused('column-twice')
	),
	make(
		'05-column-without-name.csv',
		'date,,b\n2020Q1,1,2\n2020Q2,1,2\n2020Q3,1,3\n2020Q4,1,2\n',
		refused('column-name')
	),
	make('05-long-name.csv', column('x'.repeat(201), []), refused('column-name')),
	make(
		'05-empty-columns.csv',
		'date,a,,\n2020Q1,1,,\n2020Q2,2,,\n2020Q3,4,,\n2020Q4,3,,\n',
		accepted({ notes: ['empty-columns'], figures: [1, 2, 4, 3] })
	),
	make(
		'06-too-few-fields.csv',
		'date,a,b\n2020Q1,1,2\n2020Q2,1\n2020Q3,1,3\n2020Q4,1,2\n',
		refused('ragged', { row: 3 })
	),
	make(
		'06-too-many-fields.csv',
		'date,a,b\n2020Q1,1,2\n2020Q2,1,2\n2020Q3,1,3,4\n2020Q4,1,2\n',
		refused('ragged', { row: 4 })
	),
	make(
		'07-open-quote.csv',
		'date,a\n2020Q1,1\n2020Q2,"2\n2020Q3,3\n2020Q4,4\n',
		refused('quote', { row: 3 })
	),
	make(
		'07-quote-inside.csv',
		'date,a\n2020Q1,1\n2020Q2,2"2\n2020Q3,3\n2020Q4,4\n',
		refused('quote', { row: 3 })
	),
	make(
		'07-text-after-quote.csv',
		'date,a\n2020Q1,1\n2020Q2,2\n2020Q3,"3"3\n2020Q4,4\n',
		refused('quote', { row: 4 })
	),
	make(
		'08-quoted.csv',
		'date,"a, ""real""",note\n2020Q1,"1","x,y"\n2020Q2,2,"two\nlines"\n2020Q3,4,z\n2020Q4,3,z\n',
		accepted({ figures: [1, 2, 4, 3] })
	),
	make(
		'09-mixed-line-ends.csv',
		'date,a\r\n2020Q1,1\n2020Q2,2\r2020Q3,4\r\n2020Q4,3',
		accepted({ figures: [1, 2, 4, 3] })
	),
	make(
		'09-carriage-returns.csv',
		'date,a\r2020Q1,1\r2020Q2,2\r2020Q3,4\r2020Q4,3.5\r',
		accepted({ figures: [1, 2, 4, 3.5] })
	),
	make(
		'09-lone-return.csv',
		'date,a,b\n2020Q1,1,x\ry\n2020Q2,2,z\n2020Q3,3,z\n2020Q4,4,z\n',
		refused('line-end')
	)
];

const encoding: readonly Case[] = [
	make(
		'10-nul.csv',
		join('date,a\n2020Q1,1\n2020Q2,', [0], '2\n2020Q3,3\n2020Q4,4\n'),
		refused('control', { row: 3 })
	),
	make(
		'10-escape.csv',
		join('date,a\n2020Q1,', [0x1b], '[31m1\n2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('control', { row: 2 })
	),
	make(
		'11-invalid-byte.csv',
		join('date,a\n2020Q1,1\n2020Q2,2 ', [0xff], '\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 3 })
	),
	make(
		'11-overlong.csv',
		join('date,a', [0xc0, 0xaf], '\n2020Q1,1\n2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 1 })
	),
	make(
		'11-cesu.csv',
		join('date,a\n2020Q1,', [0xed, 0xa0, 0xbd, 0xed, 0xb8, 0x80], '\n2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 2 })
	),
	make(
		'11-cut.csv',
		join('date,a\n2020Q1,1\n2020Q2,2\n2020Q3,3\n2020Q4,4', [0xe2, 0x82]),
		refused('encoding', { row: 5 })
	),
	make(
		'12-utf16le.csv',
		Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(column('ä', ['1.5']), 'utf16le')]),
		accepted({ notes: ['encoding'], figures: [1.5, 12] })
	),
	make(
		'12-utf16be.csv',
		Buffer.concat([Buffer.from([0xfe, 0xff]), Buffer.from(column('ö', ['2.5']), 'utf16le').swap16()]),
		accepted({ notes: ['encoding'], figures: [2.5, 12] })
	),
	make('12-utf16-without-mark.csv', Buffer.from(column('a', []), 'utf16le'), refused('encoding')),
	make(
		'12-utf16-odd.csv',
		Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(column('a', []), 'utf16le'), Buffer.from([0x20])]),
		refused('encoding')
	),
	make('12-utf32.csv', join([0xff, 0xfe, 0, 0, 0x64, 0, 0, 0, 0x2c, 0, 0, 0]), refused('encoding')),
	make(
		'13-windows-1252.csv',
		join('date,Zins', [0xe4], '\n2020Q1,1\n2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 1 })
	),
	make(
		'13-ebcdic.csv',
		join([
			0x84, 0x81, 0xa3, 0x85, 0x6b, 0x81, 0x15, 0xf2, 0xf0, 0xf2, 0xf0, 0x6b, 0xf1, 0x15, 0xf2, 0xf0, 0xf2,
			0xf1, 0x6b, 0xf2
		]),
		refused('encoding')
	),
	make(
		'14-mark-inside.csv',
		join('date,a\n2020Q1,1\n', [0xef, 0xbb, 0xbf], '2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 3 })
	),
	make(
		'14-two-marks.csv',
		join([0xef, 0xbb, 0xbf, 0xef, 0xbb, 0xbf], 'date,a\n2020Q1,1\n2020Q2,2\n2020Q3,3\n2020Q4,4\n'),
		refused('encoding', { row: 1 })
	)
];

const numbers: readonly Case[] = [
	make(
		'15-decimal-comma.csv',
		column('a', ['1,5', '2,25'], ';'),
		accepted({ notes: ['decimal-comma'], figures: [1.5, 2.25, 13] })
	),
	make(
		'16-ambiguous.csv',
		column('a', ['1,234', '2,345'], ';'),
		refused('ambiguous-number', { row: 2, column: 'a' })
	),
	make(
		'16-ambiguous-chosen.csv',
		column('b', ['1,234', '2,345'], ';'),
		accepted({ choices: { decimal: '.' }, notes: ['groups'], figures: [1234, 2345] })
	),
	make(
		'17-mixed-marks.csv',
		column('a', ['1.234,5', '1,234.5'], ';'),
		refused('mixed-decimal', { row: 3, column: 'a' })
	),
	make(
		'18-spaced-thousands.csv',
		column('a', ['1 234', '1\u00a0234.5', '1\u202f234', "1'234"]),
		accepted({ notes: ['groups'], figures: [1234, 1234.5, 1234, 1234] })
	),
	make('18-spaced-wrongly.csv', column('a', ['12 34']), refused('number', { row: 2, column: 'a' })),
	make(
		'19-exponents.csv',
		column('a', ['1e5', '1E+300', '.5', '5.', '+5', '-5']),
		accepted({ figures: [1e5, 1e300, 0.5, 5, 5, -5] })
	),
	make('19-overflow.csv', column('a', ['1', '1e400']), refused('overflow', { row: 3, column: 'a' })),
	make('19-underflow.csv', column('a', ['1', '1e-400']), accepted({ notes: ['underflow'], figures: [1, 0] })),
	make(
		'20-not-a-number.csv',
		column('a', ['NaN', '1.#IND', 'NA', '#N/A', '.', '-']) + '2021Q3,1\n',
		accepted({ notes: ['starts-at'], figures: [null, null, null, null, null, null, 1] })
	),
	make('20-infinite.csv', column('a', ['1', '-Inf']), refused('not-finite', { row: 3, column: 'a' })),
	make('20-infinity-sign.csv', column('a', ['∞']), refused('not-finite', { row: 2, column: 'a' })),
	make('21-minus-zero.csv', column('a', ['-0', '-0.0']), accepted({ figures: [0, 0, 13] })),
	make(
		'22-many-digits.csv',
		column('a', ['12345678901234567890', '0.12345678901234567891']),
		accepted({ notes: ['many-digits'], figures: [12345678901234567000, 0.12345678901234568] })
	),
	make('23-percent.csv', column('a', ['3.5%', '4%']), refused('mark', { row: 2, column: 'a' })),
	make('23-currency.csv', column('a', ['1', '€4']), refused('mark', { row: 3, column: 'a' })),
	make('23-footnote.csv', column('a', ['1.2(p)']), refused('mark', { row: 2, column: 'a' })),
	make('24-arabic-digits.csv', column('a', ['١٢']), refused('digits', { row: 2, column: 'a' })),
	make('24-wide-digits.csv', column('a', ['１２']), refused('digits', { row: 2, column: 'a' })),
	make(
		'24-minus-sign.csv',
		column('a', ['\u22121.5']),
		accepted({ notes: ['minus-sign'], figures: [-1.5, 12] })
	),
	make('25-text-among-numbers.csv', column('a', ['1', 'n.a.']), refused('number', { row: 3, column: 'a' })),
	make(
		'26-column-of-words.csv',
		'date,a,state\n2020Q1,1,final\n2020Q2,2,final\n2020Q3,4,final\n2020Q4,3,open\n',
		accepted({ notes: ['text-column'], figures: [1, 2, 4, 3] })
	),
	make('46-blanks.csv', column('a', [`1${' '.repeat(30_000)}2`]), refused('number', { row: 2, column: 'a' })),
	make('47-formula.csv', column('a', ['=1+1']), refused('number', { row: 2, column: 'a' })),
	make(
		'47-formula-command.csv',
		column('a', ['"=cmd|\' /C calc\'!A0"']),
		refused('number', { row: 2, column: 'a' })
	),
	make('47-formula-name.csv', column('=SUM(A1)', ['1']), accepted({ figures: [1, 12] })),
	make(
		'70-crafted-values.csv',
		'date,a,b,c,d\n2020Q1,1e308,1,2,1e300\n2020Q2,-1e308,1,2,-1e300\n2020Q3,1e-308,1,2,1e300\n2020Q4,0,1,2,-1e300\n',
		accepted({ notes: ['constant'], figures: [1e308, -1e308, 1e-308, 0] })
	)
];

const dates: readonly Case[] = [
	make(
		'27-ambiguous-date.csv',
		over(['03/04/2020', '03/05/2020', '03/06/2020', '03/07/2020']),
		refused('ambiguous-date', { row: 2 })
	),
	make(
		'27-day-above-12.csv',
		over(['31/03/2020', '30/06/2020', '30/09/2020', '31/12/2020']),
		refused('ambiguous-date', { row: 2 })
	),
	make(
		'27-chosen.csv',
		over(['03/04/2020', '03/05/2020', '03/06/2020', '03/07/2020', '03/08/2020']),
		accepted({ choices: { dateOrder: 'dmy' }, figures: [1, 4, 9] })
	),
	make(
		'28-two-formats.csv',
		over(['2020-03-31', '2020-06-30', '30/09/2020', '2020-12-31']),
		refused('mixed-dates', { row: 4 })
	),
	make(
		'29-no-such-day.csv',
		over(['2020-01-31', '2020-02-31', '2020-03-31', '2020-04-30']),
		refused('date', { row: 3 })
	),
	make('29-month-13.csv', over(['2020-12', '2020-13', '2021-01', '2021-02']), refused('date', { row: 3 })),
	make('29-fifth-quarter.csv', over(['2020Q4', '2020Q5', '2021Q1', '2021Q2']), refused('date', { row: 3 })),
	make('29-week.csv', over(['2020-W01', '2020-W02', '2020-W03', '2020-W04']), refused('date', { row: 2 })),
	make('30-year-zero.csv', over(['0000', '0001', '0002', '0003']), refused('date', { row: 2 })),
	make(
		'30-year-1066.csv',
		over(['1066', '1067', '1068', '1069']),
		accepted({ notes: ['before-1900'], figures: [1, 4, 9, 16] })
	),
	make('30-year-9999.csv', over(['2019', '2020', '2021', '9999']), refused('future', { column: 'a' })),
	make(
		'31-day-numbers.csv',
		over(['43831', '43922', '44013', '44105']),
		refused('looks-like-serials', { row: 2 })
	),
	make(
		'32-midnight.csv',
		over(['2020-03-31T00:00:00Z', '2020-06-30T00:00:00Z', '2020-09-30T00:00:00Z', '2020-12-31T00:00:00Z']),
		accepted({ figures: [1, 4, 9, 16] })
	),
	make(
		'32-noon.csv',
		over(['2020-03-31T12:00:00Z', '2020-06-30T12:00:00Z', '2020-09-30T12:00:00Z', '2020-12-31T12:00:00Z']),
		refused('time', { row: 2 })
	),
	make(
		'32-zone.csv',
		over([
			'2020-03-31T00:00:00+02:00',
			'2020-06-30T00:00:00+02:00',
			'2020-09-30T00:00:00+02:00',
			'2020-12-31T00:00:00+02:00'
		]),
		refused('time', { row: 2 })
	),
	make(
		'33-period-twice.csv',
		over(['2020Q1', '2020Q2', '2020Q2', '2020Q3']),
		refused('period-twice', { row: 4 })
	),
	make(
		'34-descending.csv',
		over(['2020Q4', '2020Q3', '2020Q2', '2020Q1']),
		accepted({ notes: ['sorted'], figures: [16, 9, 4, 1] })
	),
	make(
		'35-gap.csv',
		over(['2020Q1', '2020Q2', '2020Q4', '2021Q1', '2021Q2']),
		accepted({ notes: ['gap'], figures: [1, 4, 9] })
	),
	make(
		'36-two-frequencies.csv',
		over(['2020Q1', '2020Q2', '2020Q3', '2020-10', '2020-11']),
		refused('mixed-frequency', { row: 5 })
	),
	make(
		'36-two-frequencies-of-dates.csv',
		over(['2019-12-31', '2020-03-31', '2020-06-30', '2020-07-31', '2020-08-31', '2020-09-30']),
		refused('mixed-frequency', { row: 5 })
	),
	make(
		'36-weeks.csv',
		over(['2020-01-03', '2020-01-10', '2020-01-17', '2020-01-24', '2020-01-31', '2020-02-07']),
		refused('not-a-frequency')
	),
	make(
		'37-mixed-labels.csv',
		over(['2020-01-01', '2020-06-30', '2020-07-01', '2020-12-31']),
		accepted({ notes: ['labels-mixed'], figures: [1, 4, 9, 16] })
	),
	make(
		'38-odd-columns.csv',
		'date,a,none,same,twin\n2020Q1,1,,7,1\n2020Q2,2,,7,2\n2020Q3,4,,7,4\n2020Q4,3,,7,3\n',
		accepted({ notes: ['all-missing', 'constant', 'equal-columns'] })
	),
	make(
		'39-starts-late.csv',
		'date,a\n2020Q1,\n2020Q2,\n2020Q3,4\n2020Q4,3\n',
		accepted({ notes: ['starts-at'], figures: [null, null, 4, 3] })
	)
];

const names: readonly Case[] = [
	make('64-table.png', column('picture', ['1']), accepted({ figures: [1, 12] })),
	make('65-proto.csv', column('__proto__', []), refused('column-name')),
	make('65-constructor.csv', column('constructor', []), refused('column-name')),
	make('65-direction-mark.csv', column('a\u202eb', []), refused('column-name')),
	make('65-markup.csv', column('<img src=x onerror=alert(1)>', ['3']), accepted({ figures: [3, 12] })),
	make('65-quotes.csv', column(`A'B`, ['4']), accepted({ figures: [4, 12] })),
	make(
		'65-two-alphabets.csv',
		column('r\u0430te', ['5']),
		accepted({ notes: ['mixed-scripts'], figures: [5, 12] })
	)
];

const otherKinds: readonly Case[] = [
	make('54-pdf.csv', join('%PDF-1.7\n', [0x25, 0xe2, 0xe3], '\n1 0 obj\n'), refused('not-a-table')),
	make('54-png.csv', join([0x89], 'PNG\r\n', [0x1a, 0x0a, 0, 0, 0, 13], 'IHDR'), refused('not-a-table')),
	make('54-gzip.csv', join([0x1f, 0x8b, 8, 0, 0, 0, 0, 0, 0, 3]), refused('not-a-table')),
	make('54-parquet.csv', join('PAR1', [0x15, 0, 0x15], 'PAR1'), refused('not-a-table')),
	make(
		'54-html-table.xls',
		'<html><body><table><tr><td>2020Q1</td><td>1</td></tr></table></body></html>',
		refused('not-a-table')
	),
	make(
		'54-xml-table.xls',
		'<?xml version="1.0"?><Workbook xmlns="urn:schemas-microsoft-com:office:spreadsheet"/>',
		refused('not-a-table')
	),
	make(
		'54-old-workbook.xlsx',
		join([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1], 'x'.repeat(504)),
		refused('not-a-table')
	),
	make('54-program.csv', join('MZ', [0x90, 0, 3, 0, 0, 0, 4, 0]), refused('not-a-table')),
	make('54-json.csv', '{ "date": ["2020Q1"], "a": [1] }', refused('not-a-table')),
	make(
		'54-prose.csv',
		'Dear colleague\nplease find the figures below\nwith kind regards\n',
		refused('not-a-table')
	),
	make(
		'55-password.xlsx',
		Buffer.concat([
			join([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]),
			Buffer.alloc(504),
			Buffer.from('EncryptedPackage', 'utf16le')
		]),
		refused('encrypted')
	)
];

/** Files of text, and files that are not tables. */
export const textFiles: readonly Case[] = [
	...shape,
	...encoding,
	...numbers,
	...dates,
	...names,
	...otherKinds
];
