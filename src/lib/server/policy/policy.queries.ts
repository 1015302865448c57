import type { Kysely } from 'kysely';
import type { Schema } from '../db/schema';

type Q = Kysely<Schema>;

/** The adoption in force. */
export const policyInForce = (q: Q) => q.selectFrom('policy').selectAll().orderBy('adopted', 'desc').limit(1);

/** Every adoption, newest first. */
export const policyAdoptions = (q: Q) => q.selectFrom('policy').selectAll().orderBy('adopted', 'desc');

/** The adoption of that digest. */
export const policyByDigest = (q: Q, digest: string) =>
	q.selectFrom('policy').selectAll().where('digest', '=', digest).orderBy('adopted', 'desc').limit(1);

/** The proposal that waits for the second signature. */
export const openProposal = (q: Q) =>
	q.selectFrom('policy_proposal').selectAll().where('state', '=', 'open').limit(1);

export const proposalByFolio = (q: Q, proposal: number) =>
	q.selectFrom('policy_proposal').selectAll().where('proposal', '=', proposal);
