import type { Scope } from './actor';

/**
 * Who may act. `model-…` are relations to the model in question: the relation and, for owner and validator, the role.
 * The others are roles held, or the person the act is about.
 */
export type Who =
	| 'model-owner'
	| 'model-developer'
	| 'model-validator'
	| 'owner'
	| 'validator'
	| 'head'
	| 'auditor'
	| 'admin'
	| 'self'
	| 'starter'
	| 'person'
	| 'system';

export const purposes = ['planned', 'validation', 'exploratory'] as const;
export type Purpose = (typeof purposes)[number];

/** One row of the permission table. Whoever is not listed is refused. */
export interface Rule {
	readonly who: readonly Who[] | Readonly<Record<Purpose, readonly Who[]>>;
	/** Scope an API token needs; without one, tokens never do it (S9). */
	readonly scope?: Scope;
	/** A fresh passkey signature over the statement is needed. */
	readonly stepUp?: true;
	/** Who must agree besides, over the same statement. */
	readonly second?: readonly Who[];
	/** Reading: a refusal tells nothing, it answers as absent. */
	readonly reads?: true;
	/** Reading of what everybody may know to exist: a refusal says so. */
	readonly known?: true;
	/** Open to a recovery session, which may do nothing else. */
	readonly recovery?: true;
}

const team = ['model-owner', 'model-developer'] as const;
const overseers = ['validator', 'head', 'auditor'] as const;
const whole = { who: [...team, ...overseers], scope: 'read', reads: true } as const;
const pair = { who: ['admin'], second: ['admin'], stepUp: true } as const;

const table = {
	// Reading
	'register.read': { who: ['person'], scope: 'read' },
	'model.read-header': { who: ['person'], scope: 'read' },
	'model.read': { ...whole, known: true },
	'version.read': whole,
	'data.read': whole,
	'run.read': whole,
	'policy.read': { who: ['person'], scope: 'read' },
	'log.read': { who: overseers, scope: 'read', reads: true, known: true },
	'entry.read': whole,
	'people.read': { who: ['admin', ...overseers], reads: true, known: true },
	'account.read': { who: ['self'], recovery: true },

	// The register
	'model.register': { who: ['owner'], scope: 'write' },
	'model.edit': { who: team, scope: 'data' },
	'driver.declare': { who: team, scope: 'data' },
	'prior.declare': { who: ['model-validator'] },
	'dataset.store': { who: team, scope: 'data' },
	'version.draft': { who: team, scope: 'data' },
	'version.submit': { who: ['model-owner'], scope: 'submit-draft' },
	'version.withdraw': { who: ['model-owner'] },
	'use.record': { who: team, scope: 'data' },
	'dependency.record': { who: team, scope: 'data' },
	'limitation.record': { who: team, scope: 'data' },
	'overlay.record': { who: team, scope: 'data' },
	'exception.ask': { who: team, scope: 'data' },
	'tier.propose': { who: ['model-owner'] },
	'tier.confirm': { who: ['model-validator'] },
	'tier.override': { who: ['model-validator'], second: ['head'] },
	'model.retire': { who: ['model-owner'], second: ['head'], stepUp: true },
	'party.grant': { who: ['admin'], stepUp: true },
	'party.end': { who: ['admin'], stepUp: true },
	'validation.assign': { who: ['head'] },
	'validation.release': { who: ['head'] },

	// Runs
	'run.start': {
		who: {
			planned: team,
			validation: ['model-validator'],
			exploratory: [...team, 'model-validator', 'head']
		},
		scope: 'run'
	},
	'run.cancel': { who: ['starter', 'model-validator', 'head'], scope: 'run' },

	// Review
	'question.ask': { who: ['model-validator'] },
	'question.answer': { who: team },
	'finding.raise': { who: ['model-validator'] },
	'finding.respond': { who: team },
	'finding.raise-severity': { who: ['model-validator'] },
	'finding.lower-severity': { who: ['model-validator'], second: ['model-validator', 'head'] },
	'finding.extend': { who: ['model-validator'], second: ['model-validator', 'head'] },
	'finding.close': { who: ['model-validator'], stepUp: true },
	'finding.reopen': { who: ['model-validator', 'head', 'auditor'] },
	'remediation.propose': { who: team },
	'retest.record': { who: ['model-validator'] },
	'condition.confirm-met': { who: ['model-validator'] },
	'validation.conclude': { who: ['model-validator'], stepUp: true },
	'decision.sign': { who: ['head'], stepUp: true },
	'exception.grant': { who: ['head'], stepUp: true },
	'overlay.approve': { who: ['head'], stepUp: true },
	'restriction.lift': { who: ['head'], stepUp: true },
	'attestation.sign': { who: ['model-owner'], stepUp: true },
	'determination.record': { who: ['head'] },
	'policy.adopt': { who: ['head', 'system'], second: ['admin'], stepUp: true },
	'audit.note': { who: ['auditor'] },
	'audit.issue': { who: ['auditor'] },
	'campaign.start': { who: ['validator', 'head'] },

	// People
	'person.invite': { who: ['admin', 'system'], stepUp: true },
	'person.disable': { who: ['admin'], stepUp: true },
	'person.re-enable': pair,
	'recovery.start': pair,
	'role.grant': { who: ['admin', 'system'], stepUp: true },
	'role.propose': pair,
	'role.approve': pair,
	'grant.withdraw': { who: ['admin'] },
	'role.end': { who: ['admin'], stepUp: true },
	'session.end': { who: ['self'], recovery: true },
	'session.end-all': { who: ['admin'], stepUp: true },
	'credential.enrol': { who: ['self'], stepUp: true, recovery: true },
	'credential.revoke': { who: ['self', 'admin'], stepUp: true },
	'recovery-codes.renew': { who: ['self'], stepUp: true },
	'token.create': { who: ['self'], stepUp: true },
	'token.revoke': { who: ['self', 'admin'], stepUp: true },
	'person.erase': { who: ['admin'], second: ['auditor'], stepUp: true },
	'settings.change': { who: ['admin'], stepUp: true },

	// Exports
	'export.model': { who: ['model-owner', ...overseers], scope: 'export' },
	'export.everything': { who: ['auditor', 'head'], stepUp: true },
	'export.person': { who: ['auditor', 'head'], stepUp: true }
} as const satisfies Record<string, Rule>;

/** Everything that can be asked of the register. */
export type Action = keyof typeof table;

/** The total permission table: every action has a row, and what no row allows is refused. */
export const permissions: Readonly<Record<Action, Rule>> = table;

export const actions = Object.keys(table) as readonly Action[];
