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

const checkSubjectRows = ({ seq, subjects }: Envelope, source: Source, findings: Findings): void => {
	for (const { ref, n } of subjects) {
		const stored = source.subject.get(ref, n);
		if (stored === undefined)
			findings.fault('subject', `E-${seq}`, `the row of its subject ${ref} (${n}) is missing`);
		else if (stored !== seq)
			findings.fault('subject', `E-${seq}`, `the row of its subject ${ref} (${n}) names E-${stored}`);
	}
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
	/** Rows of entry_subject beyond those of the entries: only when their number says that there are some. */
	const end = (): void => {
		const expected = [...running.heads.values()].reduce((sum, { n }) => sum + n, 0);
		if (source.subjectCount() === expected) return;
		for (const { ref, n, seq } of source.subjects())
			if (n > (running.heads.get(ref)?.n ?? 0))
				findings.fault(
					'subject',
					`E-${seq}`,
					`a row gives it the subject ${ref} (${n}), which its bytes do not`
				);
	};
	return { check, end, last: () => running.at };
};
