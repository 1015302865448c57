import { BadEntry, readEntry, type Envelope } from '$lib/chain/entry';
import { canonical } from '$lib/chain/canonical';
import { payloadSchema } from '../record';
import type { Findings } from './report';
import type { Source, StoredEntry } from './source';

/** The state carried from entry to entry. */
interface Running {
	at: string;
	readonly heads: Map<string, { n: number; seq: number }>;
}

const columns = ['seq', 'at', 'type', 'actor'] as const;

const columnFault = (row: StoredEntry, entry: Envelope): string | undefined => {
	const column = columns.find((name) => row[name] !== entry[name]);
	return column && `the column ${column} says ${String(row[column])}, the bytes say ${String(entry[column])}`;
};

const payloadFault = ({ type, v, payload }: Envelope): string | undefined => {
	const schema = payloadSchema(type, v);
	if (!schema) return `unknown event ${type} version ${v}`;
	const parsed = schema.safeParse(payload);
	if (!parsed.success) {
		const issue = parsed.error.issues[0]!;
		return `schema: /payload/${issue.path.join('/')} ${issue.message}`;
	}
	return canonical(parsed.data) === canonical(payload)
		? undefined
		: 'schema: the payload is not in its stored form';
};

/** Each subject's count and predecessor continue what came before, so that no entry of one subject can be left out. */
const chainFault = ({ seq, subjects }: Envelope, { heads }: Running): string | undefined => {
	let fault: string | undefined;
	for (const { ref, n, prev } of subjects) {
		const head = heads.get(ref) ?? { n: 0, seq: null };
		if (n !== head.n + 1 || prev !== head.seq) fault ??= `subjects: ${ref} is counted ${n} after ${head.n}`;
		heads.set(ref, { n, seq });
	}
	return fault;
};

const checkSubjectRows = (entry: Envelope, source: Source, findings: Findings): void => {
	const rows = source.subjects.all(entry.seq);
	const said = entry.subjects.map(({ ref, n }) => `${ref} (${n})`);
	const stored = new Set(rows.map(({ ref, n }) => `${ref} (${n})`));
	const lost = said.find((subject) => !stored.has(subject));
	if (lost) findings.fault('subject', `E-${entry.seq}`, `the row of its subject ${lost} is missing`);
	const extra = [...stored].find((subject) => !said.includes(subject));
	if (extra)
		findings.fault(
			'subject',
			`E-${entry.seq}`,
			`a row gives it the subject ${extra}, which its bytes do not`
		);
};

/** Judges one entry at a time, in order; `check` gives the parsed entry, or undefined when its bytes cannot be read. */
export const entryChecker = (source: Source, findings: Findings) => {
	const running: Running = { at: '', heads: new Map() };
	const check = (row: StoredEntry): Envelope | undefined => {
		const where = `E-${row.seq}`;
		const say = (words: string | undefined): void => {
			if (words !== undefined) findings.fault('entry', where, words);
		};
		try {
			const entry = readEntry(row.bytes);
			say(columnFault(row, entry));
			say(entry.at < running.at ? `order: its time ${entry.at} lies before ${running.at}` : undefined);
			say(payloadFault(entry));
			say(chainFault(entry, running));
			checkSubjectRows(entry, source, findings);
			running.at = entry.at;
			return entry;
		} catch (cause) {
			if (!(cause instanceof BadEntry)) throw cause;
			say(cause.message);
			return undefined;
		}
	};
	return {
		check,
		last: () => running.at,
		subjects: () => [...running.heads.values()].reduce((sum, { n }) => sum + n, 0)
	};
};
