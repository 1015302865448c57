import type { Projectors } from '../context';
import { openProposal, proposalByFolio } from './policy.queries';

/** Adoptions and proposals as rows. */
export const policyProjectors: Projectors = {
	'policy.proposed': (tx, entry) => {
		const open = tx.first(openProposal(tx.q));
		// One proposal waits at a time: the later one replaces the earlier.
		if (open)
			tx.update('policy_proposal', { proposal: open.proposal }, { state: 'superseded', entry: entry.seq });
		const { policy, release, document, changed } = entry.payload;
		tx.insert('policy_proposal', {
			proposal: entry.seq,
			digest: policy,
			release,
			document: document ?? null,
			changed: JSON.stringify(changed),
			at: entry.at,
			by: entry.actor,
			state: 'open',
			entry: entry.seq
		});
	},
	'policy.adopted': (tx, entry) => {
		const { policy, release, document, proposal } = entry.payload;
		const proposed = proposal === undefined ? undefined : tx.first(proposalByFolio(tx.q, proposal));
		if (proposed)
			tx.update('policy_proposal', { proposal: proposed.proposal }, { state: 'adopted', entry: entry.seq });
		tx.insert('policy', {
			adopted: entry.seq,
			digest: policy,
			release,
			document: document ?? null,
			at: entry.at,
			by: entry.actor,
			proposed_by: proposed?.by ?? null,
			proposal: proposed?.proposal ?? null,
			entry: entry.seq
		});
	}
};
