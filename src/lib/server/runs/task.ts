import type { MessagePort } from 'node:worker_threads';
import type { ParsedTable } from '$lib/domain/lineage';
import type { Policy } from '$lib/domain/policy';
import type { RunRequest } from '$lib/domain/run';
import type { CheckCounts, Headline } from './headline';

/** How far a computation is: checks done of checks to do, and which one is next. */
export interface Progress {
	readonly done: number;
	readonly of: number;
	readonly label: string;
}

/** A run as plain data: nothing of it needs the database, so that another machine could compute it. */
export interface ComputeTask {
	readonly request: RunRequest;
	readonly policy: Policy;
	readonly data: Pick<ParsedTable, 'frequency' | 'periods' | 'columns'>;
}

/** What the thread sends back: the whole result as canonical bytes and what its entry says, or why there is none. */
export type Computed =
	| {
			readonly state: 'computed';
			readonly bytes: Uint8Array;
			readonly digest: string;
			readonly checks: CheckCounts;
			readonly groups: readonly {
				readonly group: string;
				readonly verdict: 'holds' | 'query' | 'fails' | 'not assessable';
			}[];
			readonly headline: Headline;
	  }
	| { readonly state: 'refused'; readonly sentence: string };

/** A task as the thread receives it, with the port it reports to. */
export type Ported<T> = T & { readonly port: MessagePort };
