import { canonical } from '$lib/chain/canonical';
import type { Entry } from '$lib/domain/entry';
import { ordinal } from '$lib/domain/references';
import type { Projectors } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import { partiesNow } from './register.queries';

type Relation = 'owner' | 'developer' | 'validator';

const startParty = (tx: Tx, entry: Entry, model: string, relation: Relation, person: string): void =>
	tx.insert('model_party', {
		model,
		relation,
		person,
		from_at: entry.at,
		until_at: null,
		entry: entry.seq
	});

const setUses = (tx: Tx, entry: Entry, model: string, uses: readonly string[]): void => {
	tx.remove('model_use', { model });
	for (const use of uses) tx.insert('model_use', { model, use, entry: entry.seq });
};

/** Rows of the register room, from its entries alone. */
export const registerProjectors: Projectors = {
	'model.registered': (tx, entry) => {
		const { model, name, purpose, portfolio, uses, owner, developers, answers } = entry.payload;
		tx.insert('model', {
			ref: model,
			name,
			purpose,
			portfolio,
			answers: canonical(answers),
			tier: null,
			tier_how: null,
			tier_reason: null,
			override_tier: null,
			override_reason: null,
			override_by: null,
			registered_at: entry.at,
			registered_by: entry.actor,
			entry: entry.seq
		});
		setUses(tx, entry, model, uses);
		startParty(tx, entry, model, 'owner', owner);
		for (const developer of developers) startParty(tx, entry, model, 'developer', developer);
	},
	'model.edited': (tx, entry) => {
		const { model, uses, answers, ...words } = entry.payload;
		tx.update(
			'model',
			{ ref: model },
			{ ...words, ...(answers && { answers: canonical(answers) }), entry: entry.seq }
		);
		if (uses) setUses(tx, entry, model, uses);
	},
	'party.started': (tx, entry) => {
		const { model, person, relation } = entry.payload;
		startParty(tx, entry, model, relation, person);
	},
	'party.ended': (tx, entry) => {
		const { model, person, relation } = entry.payload;
		const row = tx
			.all(partiesNow(tx.q, model))
			.find((party) => party.person === person && party.relation === relation);
		if (!row) throw new Error(`${person} is not ${relation} of ${model}`);
		tx.update(
			'model_party',
			{ model, relation, person, from_at: row.from_at },
			{ until_at: entry.at, entry: entry.seq }
		);
	},
	'tier.confirmed': (tx, entry) => {
		const { model, tier, reason } = entry.payload;
		tx.update(
			'model',
			{ ref: model },
			{
				tier,
				tier_how: 'confirmed',
				tier_reason: reason ?? null,
				override_tier: null,
				override_reason: null,
				override_by: null,
				entry: entry.seq
			}
		);
	},
	'tier.override-proposed': (tx, entry) => {
		const { model, tier, reason } = entry.payload;
		tx.update(
			'model',
			{ ref: model },
			{ override_tier: tier, override_reason: reason, override_by: entry.actor, entry: entry.seq }
		);
	},
	'tier.overridden': (tx, entry) => {
		const { model, tier, reason } = entry.payload;
		tx.update(
			'model',
			{ ref: model },
			{
				tier,
				tier_how: 'overridden',
				tier_reason: reason,
				override_tier: null,
				override_reason: null,
				override_by: null,
				entry: entry.seq
			}
		);
	},
	'prior.declared': (tx, entry) => {
		const { model, n, side, late, drivers } = entry.payload;
		for (const driver of drivers)
			tx.insert('prior', {
				model,
				n,
				series: driver.series,
				side,
				sign: driver.sign,
				low: driver.low,
				high: driver.high,
				rationale: driver.rationale,
				late: late ? 1 : 0,
				at: entry.at,
				by: entry.actor,
				entry: entry.seq
			});
	},
	'version.drafted': (tx, entry) => {
		const { version, model, specification, digest, reason, predecessor } = entry.payload;
		tx.insert('version', {
			ref: version,
			model,
			ordinal: ordinal(version),
			state: 'draft',
			specification: canonical(specification),
			digest,
			reason,
			predecessor: predecessor ?? null,
			drafted_by: entry.actor,
			drafted_at: entry.at,
			revised_at: entry.at,
			submitted_by: null,
			submitted_at: null,
			withdrawn_at: null,
			withdrawn_reason: null,
			entry: entry.seq
		});
	},
	'version.revised': (tx, entry) => {
		const { version, specification, digest, reason } = entry.payload;
		tx.update(
			'version',
			{ ref: version, state: 'draft' },
			{
				specification: canonical(specification),
				digest,
				reason,
				revised_at: entry.at,
				entry: entry.seq
			}
		);
	},
	'version.submitted': (tx, entry) => {
		tx.update(
			'version',
			{ ref: entry.payload.version, state: 'draft' },
			{ state: 'submitted', submitted_by: entry.actor, submitted_at: entry.at, entry: entry.seq }
		);
	},
	'version.withdrawn': (tx, entry) => {
		const { version, reason } = entry.payload;
		tx.update(
			'version',
			{ ref: version },
			{ state: 'withdrawn', withdrawn_at: entry.at, withdrawn_reason: reason, entry: entry.seq }
		);
	}
};
