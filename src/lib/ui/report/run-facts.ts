/** What the report says of a run as a whole, as plain data: the view of a run that a page is given. */
import type { Override, Purpose } from '$lib/domain/run';
import { formatDate } from '../format';
import { ordinalWord } from './figures';

export interface RunFacts {
	readonly ref: string;
	readonly model: string;
	readonly version: string;
	readonly vintage: string;
	readonly file: string;
	readonly table: string;
	readonly policy: string;
	readonly tier: number;
	readonly purpose: Purpose;
	readonly settings: readonly Override[];
	readonly seed: number;
	readonly engine: string;
	readonly request: string;
	readonly state: 'queued' | 'running' | 'finished' | 'failed' | 'cancelled';
	readonly progress?: { readonly done: number; readonly of: number; readonly label: string };
	readonly requestedBy: string;
	readonly requestedAt: string;
	readonly endedAt?: string;
	readonly failure?: string;
	readonly resultDigest?: string;
	readonly reruns: {
		readonly nth: number;
		readonly of: number;
		readonly refs: readonly string[];
		readonly digest: 'alone' | 'equal' | 'different';
	};
	readonly entry: number;
	readonly mayCancel: boolean;
}

/** `R-0207 · planned · finished 2026-11-19`. */
export function statusWords({
	ref,
	purpose,
	state,
	endedAt
}: Pick<RunFacts, 'ref' | 'purpose' | 'state' | 'endedAt'>): string {
	return [ref, purpose, endedAt === undefined ? state : `${state} ${formatDate(endedAt)}`].join(' · ');
}

const digestWords = { alone: '', equal: ', digest equal', different: ', digest different' } as const;

/** `third run of this request, digest equal`; nothing for the only one. */
export function rerunWords({ reruns: { nth, of, digest } }: RunFacts): string | null {
	return of < 2 ? null : `${ordinalWord(nth)} of ${of} runs of this request${digestWords[digest]}`;
}
