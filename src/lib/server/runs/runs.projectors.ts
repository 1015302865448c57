import { canonical } from '$lib/chain/canonical';
import type { Projectors } from '../context';

/** Rows of the runs room, from its entries alone. */
export const runsProjectors: Projectors = {
	'run.requested': (tx, entry) => {
		const {
			run,
			model,
			version,
			vintage,
			file,
			table,
			policy,
			tier,
			settings,
			seed,
			purpose,
			engine,
			request
		} = entry.payload;
		tx.insert('run', {
			ref: run,
			model,
			version,
			vintage,
			file_sha256: file,
			table_sha256: table,
			policy_digest: policy,
			tier,
			settings: canonical(settings),
			seed,
			purpose,
			engine,
			request_digest: request,
			requested_by: entry.actor,
			requested_at: entry.at,
			state: 'requested',
			ended_at: null,
			result_blob: null,
			result_digest: null,
			holds: null,
			query: null,
			fails: null,
			not_assessable: null,
			groups: null,
			headline: null,
			failure: null,
			entry: entry.seq
		});
	},
	'run.finished': (tx, entry) => {
		const { run, result, resultDigest, checks, groups, headline } = entry.payload;
		tx.update(
			'run',
			{ ref: run, state: 'requested' },
			{
				state: 'finished',
				ended_at: entry.at,
				result_blob: result,
				result_digest: resultDigest,
				holds: checks.holds,
				query: checks.query,
				fails: checks.fails,
				not_assessable: checks.notAssessable,
				groups: canonical(groups),
				headline: canonical(headline),
				entry: entry.seq
			}
		);
	},
	'run.failed': (tx, entry) => {
		const { run, sentence } = entry.payload;
		tx.update(
			'run',
			{ ref: run, state: 'requested' },
			{ state: 'failed', ended_at: entry.at, failure: sentence, entry: entry.seq }
		);
	},
	'run.cancelled': (tx, entry) => {
		tx.update(
			'run',
			{ ref: entry.payload.run, state: 'requested' },
			{ state: 'cancelled', ended_at: entry.at, entry: entry.seq }
		);
	}
};
