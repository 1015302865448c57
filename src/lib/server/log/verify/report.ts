/** What a fault concerns, in the order in which the parts are checked. */
export const parts = [
	'file',
	'schema',
	'entry',
	'subject',
	'node',
	'checkpoint',
	'blob',
	'gate',
	'head',
	'replay',
	'table'
] as const;
export type Part = (typeof parts)[number];

export interface Fault {
	readonly part: Part;
	/** What a person cites: `E-12`, `node 40`, `checkpoint 8`, `sha256:…`, `model M-014`. */
	readonly where: string;
	readonly words: string;
}

/** A cell that differs between the register and its replay; columns are absent where a whole row is. */
export interface Difference {
	readonly table: string;
	readonly key: string;
	readonly column?: string;
	readonly live?: unknown;
	readonly replayed?: unknown;
	/** The entry that wrote the replayed row, or the live one where there is no replayed row. */
	readonly entry: number | null;
}

export interface Report {
	readonly origin?: string;
	readonly verifierKey?: string;
	readonly entries: number;
	readonly nodes: number;
	readonly checkpoints: number;
	readonly blobs: number;
	readonly tables: number;
	readonly rows: number;
	/** Root over all entries, hexadecimal. */
	readonly root?: string;
	/** The first fault of each part, and how many more of the part there are. */
	readonly faults: readonly (Fault & { readonly more: number })[];
	readonly differences: readonly Difference[];
	/** What could not be looked at, and why. */
	readonly notChecked: readonly string[];
	/** Sound, but a reader must know it. */
	readonly remarks: readonly string[];
	/** True when no key from outside was given, so that nobody vouches for the one that E-0 names. */
	readonly unvouched: boolean;
}

/** Collects faults; keeps the first of each part and counts the rest. */
export class Findings {
	readonly #first = new Map<Part, Fault & { more: number }>();
	readonly differences: Difference[] = [];
	readonly notChecked: string[] = [];
	readonly remarks: string[] = [];

	fault(part: Part, where: string, words: string): void {
		const first = this.#first.get(part);
		if (first) first.more++;
		else this.#first.set(part, { part, where, words, more: 0 });
	}

	has(...wanted: readonly Part[]): boolean {
		return wanted.some((part) => this.#first.has(part));
	}

	faults(): (Fault & { more: number })[] {
		return parts.flatMap((part) => this.#first.get(part) ?? []);
	}
}
