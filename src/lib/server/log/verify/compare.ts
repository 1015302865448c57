import { projectedTables } from '../../db/tables';
import type Sqlite from 'better-sqlite3';
import type { Difference, Findings } from './report';

type Cell = null | number | string | Buffer;
type Row = Record<string, Cell>;

interface Shape {
	readonly columns: readonly string[];
	readonly key: readonly string[];
}

const quoted = (name: string): string => `"${name}"`;

const shapeOf = (sqlite: Sqlite.Database, table: string): Shape => {
	const info = sqlite.pragma(`table_info(${quoted(table)})`) as { name: string; pk: number }[];
	const key = info.filter(({ pk }) => pk > 0).sort((a, b) => a.pk - b.pk);
	return { columns: info.map(({ name }) => name), key: key.map(({ name }) => name) };
};

const rowsOf = (sqlite: Sqlite.Database, table: string, { key }: Shape): Iterator<Row> =>
	sqlite.prepare<[], Row>(`select * from ${quoted(table)} order by ${key.map(quoted).join(', ')}`).iterate();

const equal = (a: Cell | undefined, b: Cell | undefined): boolean =>
	Buffer.isBuffer(a) && Buffer.isBuffer(b) ? a.equals(b) : a === b;

/** SQLite's order of two cells of a key: NULL, numbers, text, blobs; text by its bytes. */
const compareCells = (a: Cell, b: Cell): number => {
	const rank = (cell: Cell): number =>
		cell === null ? 0 : typeof cell === 'number' ? 1 : typeof cell === 'string' ? 2 : 3;
	if (rank(a) !== rank(b)) return rank(a) - rank(b);
	if (typeof a === 'number' && typeof b === 'number') return a - b;
	return Buffer.compare(Buffer.from((a ?? '') as string), Buffer.from((b ?? '') as string));
};

const compareKeys = (a: Row, b: Row, key: readonly string[]): number => {
	for (const column of key) {
		const order = compareCells(a[column]!, b[column]!);
		if (order !== 0) return order;
	}
	return 0;
};

const keyText = (row: Row, key: readonly string[]): string =>
	key.map((column) => String(row[column])).join(' ');

const entryOf = (row: Row): number | null => (typeof row['entry'] === 'number' ? row['entry'] : null);

/** Walks two tables in the order of their keys and yields each difference. */
const differences = function* (
	table: string,
	shape: Shape,
	live: Iterator<Row>,
	replayed: Iterator<Row>,
	counted: () => void
): Generator<Difference> {
	let mine = live.next();
	let theirs = replayed.next();
	while (!mine.done || !theirs.done) {
		const order = mine.done ? 1 : theirs.done ? -1 : compareKeys(mine.value, theirs.value, shape.key);
		if (order < 0) {
			counted();
			const row = mine.value as Row;
			yield { table, key: keyText(row, shape.key), live: 'a row', entry: entryOf(row) };
		} else if (order > 0) {
			const row = theirs.value as Row;
			yield { table, key: keyText(row, shape.key), replayed: 'a row', entry: entryOf(row) };
		} else {
			counted();
			const [a, b] = [mine.value as Row, theirs.value as Row];
			for (const column of shape.columns)
				if (!equal(a[column], b[column]))
					yield {
						table,
						key: keyText(a, shape.key),
						column,
						live: a[column],
						replayed: b[column],
						entry: entryOf(b)
					};
		}
		if (order <= 0) mine = live.next();
		if (order >= 0) theirs = replayed.next();
	}
};

const wordsOf = ({ column, live, replayed, entry }: Difference): string => {
	const written = entry === null ? '' : `, written by E-${entry}`;
	if (column !== undefined)
		return `column ${column} is ${JSON.stringify(live)}; the log says ${JSON.stringify(replayed)}${written}`;
	return live === undefined
		? `the row is missing${written}`
		: `the log knows no such row (it names E-${entry})`;
};

/** Kept of the differences found; the rest is counted. */
const most = 100;

/** Compares every projected table with its replay, row by row. Returns the number of tables and of live rows. */
export const compareTables = (
	live: Sqlite.Database,
	replayed: Sqlite.Database,
	findings: Findings
): { tables: number; rows: number } => {
	let rows = 0;
	let tables = 0;
	for (const table of projectedTables) {
		const shape = shapeOf(replayed, table);
		if (shape.columns.length === 0) continue;
		tables++;
		if (shapeOf(live, table).columns.join() !== shape.columns.join()) {
			findings.fault('table', table, 'does not have the columns it must have');
			continue;
		}
		for (const found of differences(
			table,
			shape,
			rowsOf(live, table, shape),
			rowsOf(replayed, table, shape),
			() => rows++
		)) {
			findings.fault('table', `${table} ${found.key}`, wordsOf(found));
			if (findings.differences.length < most) findings.differences.push(found);
		}
	}
	return { tables, rows };
};

/** Tables, indexes and triggers must be those of this release: a weaker trigger or a dropped check is named. */
export const compareSchemas = (
	live: Sqlite.Database,
	expected: Sqlite.Database,
	findings: Findings
): void => {
	const objects = (sqlite: Sqlite.Database): Map<string, string | null> =>
		new Map(
			sqlite
				.prepare<[], { type: string; name: string; sql: string | null }>(
					`select type, name, sql from sqlite_schema where name not like 'sqlite_stat%' order by name`
				)
				.all()
				.map(({ type, name, sql }) => [`${type} ${name}`, sql])
		);
	const mine = objects(live);
	const theirs = objects(expected);
	for (const [name, sql] of theirs)
		if (!mine.has(name)) findings.fault('schema', name, 'is missing');
		else if (mine.get(name) !== sql) findings.fault('schema', name, 'does not have the text it must have');
	for (const name of mine.keys())
		if (!theirs.has(name)) findings.fault('schema', name, 'does not belong here');
};
