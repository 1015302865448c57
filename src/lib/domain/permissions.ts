import type { Actor, PersonId, Role } from './actor';
import type { Grant } from './entry';
import { permissions, type Action, type Purpose, type Who } from './permission-table';
import { separation } from './separation';

export const parties = ['owner', 'developer', 'validator'] as const;
/** A person's relation to a model. */
export type Party = (typeof parties)[number];

/** What authorisation must know of a model; computed from the log at the moment of asking. */
export interface ModelFacts {
	/** `M-014`. */
	readonly ref: string;
	/** Relations in force now. */
	readonly owners: readonly PersonId[];
	readonly developers: readonly PersonId[];
	readonly validators: readonly PersonId[];
	/**
	 * Everyone who touched it within the look-back (S1): owner or developer now or then, of it or of a predecessor;
	 * actor of an edit, dataset, planned run, submission or answer.
	 */
	readonly touched: ReadonlySet<PersonId>;
	/** Folio up to which the log was searched for touching. */
	readonly searchedTo: number;
}

/** What authorisation must know of the person an act is about. */
export interface PersonFacts {
	readonly person: PersonId;
	readonly roles: readonly Role[];
	readonly state: 'invited' | 'enrolled' | 'disabled';
	/** Relations to models in force now. */
	readonly parties: readonly Party[];
	/** Enrolled admins in force, this person left out (S7). */
	readonly otherAdmins: number;
}

/** Everything the answer depends on. */
export interface Facts {
	readonly actor: Actor;
	/** False once the person is disabled, or has not enrolled. */
	readonly active: boolean;
	/** The actor came back through recovery within 24 hours (S8). */
	readonly recovered: boolean;
	readonly model?: ModelFacts;
	readonly person?: PersonFacts;
	readonly role?: Role;
	readonly party?: Party;
	readonly purpose?: Purpose;
	/** Who started the run in question. */
	readonly starter?: PersonId;
	/** The first of a pair, when the second is asking. */
	readonly first?: PersonId;
	/** Enrolled admins in force. */
	readonly admins: number;
}

export type Answer =
	| { readonly allowed: true; readonly grant: Grant }
	| { readonly allowed: false; readonly rule: string; readonly words: string; readonly visible: boolean };

/** A role is what the entry names; a relation to a model is named by the role it stands for. */
const roleOf: Readonly<Partial<Record<Who, Role>>> = {
	'model-owner': 'owner',
	'model-validator': 'validator',
	owner: 'owner',
	validator: 'validator',
	head: 'head',
	auditor: 'auditor',
	admin: 'admin'
};

const isWho = (who: Who, facts: Facts): boolean => {
	const { actor, model } = facts;
	if (actor.person === 'system' || actor.person === 'cli') return who === actor.person;
	switch (who) {
		case 'model-owner':
			return actor.roles.includes('owner') && model !== undefined && model.owners.includes(actor.person);
		case 'model-developer':
			return model !== undefined && model.developers.includes(actor.person);
		case 'model-validator':
			return (
				actor.roles.includes('validator') && model !== undefined && model.validators.includes(actor.person)
			);
		case 'self':
			return facts.person?.person === actor.person;
		case 'starter':
			return facts.starter === actor.person;
		case 'person':
			return true;
		case 'system':
			return false;
		default:
			return actor.roles.includes(who);
	}
};

const refusal = (rule: string, words: string, visible = true): Answer =>
	Object.freeze({ allowed: false, rule, words, visible });

/** Those of the row; when the first of a pair has signed, those who may sign second. */
const whoMay = (action: Action, { purpose, first }: Facts): readonly Who[] => {
	const { who, second } = permissions[action];
	if (first !== undefined && second) return second;
	return 'planned' in who ? (purpose ? who[purpose] : []) : who;
};

/** What holds for the actor whatever the row says: alive, not in recovery, not by token. */
const gateOf = (action: Action, facts: Facts): Answer | undefined => {
	const rule = permissions[action];
	const { actor } = facts;
	const person = actor.person !== 'system' && actor.person !== 'cli';
	if (person && !facts.active) return refusal('S11', 'This person is not active in the register.');
	if ((actor.means === 'recovery' || actor.means === 'password') && !rule.recovery)
		return refusal('recovery', 'A recovery session may only enrol a passkey and sign out.');
	if (actor.means === 'token') {
		if (!rule.scope) return refusal('S9', 'An API token never does this; sign in and do it yourself.');
		if (!actor.scopes?.includes(rule.scope))
			return refusal('scope', `The token lacks the scope "${rule.scope}".`);
	}
	return undefined;
};

/**
 * The one answer to "may they?": pure, closed by default. The first row of the table that fits the actor and passes
 * the separation of duties allows; otherwise the rule that refused is named.
 */
export const authorize = (action: Action, facts: Facts): Answer => {
	const gate = gateOf(action, facts);
	if (gate) return gate;
	const rule = permissions[action];
	let refused: Answer | undefined;
	for (const who of whoMay(action, facts)) {
		if (!isWho(who, facts)) continue;
		const breach = separation(action, who, facts);
		if (breach) {
			refused ??= refusal(breach.rule, breach.words);
			continue;
		}
		const role = roleOf[who];
		const judged = who === 'model-validator' || who === 'head';
		const grant: Grant = Object.freeze({
			rule: action,
			...(role ? { role } : {}),
			...(facts.model ? { model: facts.model.ref } : {}),
			...(facts.model && judged ? { lookBackClear: facts.model.searchedTo } : {})
		});
		return Object.freeze({ allowed: true, grant });
	}
	const visible = !rule.reads || rule.known === true;
	return refused ?? refusal('S11', 'No row of the permission table allows this to you.', visible);
};
