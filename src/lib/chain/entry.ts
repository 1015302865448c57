import { canonical, NotCanonical, parseCanonical } from './canonical';
import { textFault } from './text';

/** Bounds of one entry: bytes of its canonical text, nesting, UTF-16 units of a string, items of an array. */
export const limits = Object.freeze({ bytes: 65_536, depth: 16, text: 16_384, items: 4096, subjects: 64 });

/** Something in an entry that its rules forbid: where, as a JSON pointer, and what. */
export interface EntryFault {
	readonly pointer: string;
	readonly message: string;
}

const key = /^[a-z][A-Za-z0-9]{0,63}$/;
const escaped = (part: string): string => part.replaceAll('~', '~0').replaceAll('/', '~1');

/** Walks a JSON value by the rules that hold for every entry; the first fault found, or undefined. */
const valueFault = (value: unknown, pointer: string, depth: number): EntryFault | undefined => {
	const fault = (message: string): EntryFault => ({ pointer, message });
	if (typeof value === 'string') {
		if (value.length > limits.text) return fault(`is longer than ${limits.text} characters`);
		const wrong = textFault(value, 'long');
		return wrong === undefined ? undefined : fault(wrong);
	}
	if (typeof value === 'boolean') return undefined;
	if (typeof value === 'number') return numberFault(value, fault);
	if (value === null) return fault('is null: what is not given is left out');
	if (typeof value !== 'object') return fault(`is ${typeof value}, which JSON does not have`);
	if (depth > limits.depth) return fault(`is nested deeper than ${limits.depth} levels`);
	return Array.isArray(value) ? arrayFault(value, pointer, depth) : objectFault(value, pointer, depth);
};

const numberFault = (value: number, fault: (message: string) => EntryFault): EntryFault | undefined => {
	if (!Number.isFinite(value)) return fault('is not a finite number');
	if (Number.isInteger(value) && !Number.isSafeInteger(value) && Math.abs(value) < 1e21)
		return fault('is an integer beyond 2^53 − 1: write it as text');
	return undefined;
};

const arrayFault = (value: readonly unknown[], pointer: string, depth: number): EntryFault | undefined => {
	if (value.length > limits.items) return { pointer, message: `holds more than ${limits.items} items` };
	for (const [index, item] of value.entries()) {
		const fault = valueFault(item, `${pointer}/${index}`, depth + 1);
		if (fault) return fault;
	}
	return undefined;
};

const objectFault = (value: object, pointer: string, depth: number): EntryFault | undefined => {
	for (const [name, member] of Object.entries(value)) {
		const at = `${pointer}/${escaped(name)}`;
		if (!key.test(name)) return { pointer: at, message: 'is not a key that entries may have' };
		if (member === undefined) continue;
		const fault = valueFault(member, at, depth + 1);
		if (fault) return fault;
	}
	return undefined;
};

/** The envelope of every entry: what stands beside its payload. */
export interface Envelope {
	readonly seq: number;
	readonly at: string;
	readonly type: string;
	readonly v: number;
	readonly actor: string;
	readonly subjects: readonly { readonly n: number; readonly prev: number | null; readonly ref: string }[];
	readonly payload: object;
	readonly auth: { readonly means: string; readonly rule: string };
	readonly request: string;
}

export const typeForm = /^[a-z]+(?:-[a-z]+)*\.[a-z]+(?:-[a-z]+)*$/;
export const actorForm = /^(?:p_[a-z2-7]{26}|system|cli)$/;
export const instantForm = /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}\.\d{3}Z$/;

const natural = (value: unknown, least: number): boolean =>
	Number.isSafeInteger(value) && (value as number) >= least;
const line = (value: unknown): boolean =>
	typeof value === 'string' &&
	value.length > 0 &&
	value.length <= 200 &&
	textFault(value, 'name') === undefined;
const instant = (value: unknown): boolean =>
	typeof value === 'string' && instantForm.test(value) && new Date(value).toISOString() === value;
const record = (value: unknown): value is Record<string, unknown> =>
	typeof value === 'object' && value !== null && !Array.isArray(value);

const required: Record<string, (value: unknown) => boolean> = {
	seq: (value) => natural(value, 0),
	at: instant,
	type: (value) => typeof value === 'string' && typeForm.test(value),
	v: (value) => natural(value, 1),
	actor: (value) => typeof value === 'string' && actorForm.test(value),
	subjects: Array.isArray,
	payload: record,
	auth: (value) => record(value) && line(value['means']) && line(value['rule']),
	request: line
};
const optional: Record<string, (value: unknown) => boolean> = {
	behalf: (value) => typeof value === 'string' && actorForm.test(value),
	clock: (value) =>
		record(value) && instant(value['raw']) && /^(?:behind|jump)$/.test(String(value['reason']))
};

const subjectsFault = (subjects: readonly unknown[], seq: number): EntryFault | undefined => {
	if (subjects.length < 1 || subjects.length > limits.subjects)
		return { pointer: '/subjects', message: `must be 1 to ${limits.subjects}` };
	let last = '';
	for (const [index, subject] of subjects.entries()) {
		const fault = (message: string): EntryFault => ({ pointer: `/subjects/${index}`, message });
		if (!record(subject) || Object.keys(subject).sort().join() !== 'n,prev,ref') return fault('is malformed');
		const { n, prev, ref } = subject;
		if (!line(ref)) return fault('is not named by one line of text');
		if ((ref as string) <= last) return fault('is out of order, or there twice');
		if (!natural(n, 1) || (n === 1) !== (prev === null))
			return fault('has a count that does not fit its predecessor');
		if (prev !== null && !(natural(prev, 0) && (prev as number) < seq))
			return fault('has a predecessor that is not earlier');
		last = ref as string;
	}
	return undefined;
};

/** The first rule an entry breaks, whatever its payload's schema says; undefined when it keeps all. */
export const entryFault = (value: unknown): EntryFault | undefined => {
	if (!record(value)) return { pointer: '', message: 'is not an object' };
	for (const name of Object.keys(value))
		if (!(name in required || name in optional))
			return { pointer: `/${name}`, message: 'is not a field of entries' };
	for (const [name, test] of Object.entries(required))
		if (!test(value[name])) return { pointer: `/${name}`, message: 'is missing or malformed' };
	for (const [name, test] of Object.entries(optional))
		if (value[name] !== undefined && !test(value[name]))
			return { pointer: `/${name}`, message: 'is malformed' };
	const { subjects, ...rest } = value;
	return subjectsFault(subjects as unknown[], value['seq'] as number) ?? valueFault(rest, '', 1);
};

/** An entry that breaks a rule; nothing was stored. */
export class BadEntry extends Error {
	override readonly name = 'BadEntry';
	constructor(readonly fault: EntryFault) {
		super(`${fault.pointer || 'the entry'} ${fault.message}`);
	}
}

const tooLong = (bytes: number): BadEntry | undefined =>
	bytes > limits.bytes
		? new BadEntry({ pointer: '', message: `has ${bytes} bytes; at most ${limits.bytes} may be written` })
		: undefined;

/** The canonical text of an entry. @throws BadEntry */
export const entryText = (entry: Envelope): string => {
	const fault = entryFault(entry);
	if (fault) throw new BadEntry(fault);
	const text = canonical(entry);
	const long = tooLong(Buffer.byteLength(text));
	if (long) throw long;
	return text;
};

/** Reads the bytes of an entry strictly. @throws BadEntry */
export const readEntry = (bytes: Uint8Array): Envelope => {
	const long = tooLong(bytes.length);
	if (long) throw long;
	let value: unknown;
	try {
		value = parseCanonical(bytes);
	} catch (cause) {
		if (!(cause instanceof NotCanonical)) throw cause;
		throw new BadEntry({ pointer: '', message: `is not canonical: ${cause.message}` });
	}
	const fault = entryFault(value);
	if (fault) throw new BadEntry(fault);
	return value as Envelope;
};
