import { digestOf } from '$lib/chain/digest';
import type { Projectors } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import { grantInForce } from './people.queries';

/** Closes the proposal that an act of two admins carries out. */
const approved = (tx: Tx, proposal: number | undefined, entry: number): void => {
	if (proposal !== undefined) tx.update('grant_proposal', { seq: proposal }, { outcome: 'approved', entry });
};

/** People, roles and proposals as the log says them. */
export const peopleProjectors: Projectors = {
	'person.invited': (tx, { seq, at, payload }) =>
		tx.insert('person_state', {
			person: payload.person,
			state: 'invited',
			since: at,
			identity: null,
			recovered_at: null,
			entry: seq
		}),
	'person.enrolled': (tx, { seq, at, payload: { person, identity } }) =>
		tx.update('person_state', { person }, { state: 'enrolled', since: at, identity, entry: seq }),
	'person.disabled': (tx, { seq, at, payload: { person } }) =>
		tx.update('person_state', { person }, { state: 'disabled', since: at, entry: seq }),
	'person.re-enabled': (tx, { seq, at, payload: { person, proposal } }) => {
		tx.update('person_state', { person }, { state: 'enrolled', since: at, entry: seq });
		approved(tx, proposal, seq);
	},
	'recovery.started': (tx, { seq, at, payload: { person, proposal } }) => {
		tx.update('person_state', { person }, { recovered_at: at, entry: seq });
		approved(tx, proposal, seq);
	},
	'recovery-code.used': (tx, { seq, at, payload: { person } }) =>
		tx.update('person_state', { person }, { recovered_at: at, entry: seq }),
	'grant.proposed': (tx, { seq, actor, payload, auth }) =>
		tx.insert('grant_proposal', {
			seq,
			act: payload.act,
			person: payload.person,
			role: payload.role ?? null,
			from_at: payload.from ?? null,
			by: actor,
			statement: digestOf(Buffer.from(auth.stepUp?.statement ?? '', 'utf8')),
			expires_at: payload.expires,
			outcome: null,
			entry: seq
		}),
	'grant.withdrawn': (tx, { seq, payload }) =>
		tx.update('grant_proposal', { seq: payload.proposal }, { outcome: 'withdrawn', entry: seq }),
	'role.granted': (tx, { seq, actor, payload: { person, role, from, proposal } }) => {
		tx.insert('role_grant', { person, role, from_at: from, until_at: null, granted_by: actor, entry: seq });
		approved(tx, proposal, seq);
	},
	'role.ended': (tx, { seq, payload: { person, role, until } }) => {
		for (const { from_at } of tx.all(grantInForce(tx.q, person, role, until)))
			tx.update('role_grant', { person, role, from_at }, { until_at: until, entry: seq });
	}
};
