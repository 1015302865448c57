import type { Role } from './actor';
import { permissions, type Action, type Who } from './permission-table';
import type { Facts, Party } from './permissions';

/** A rule of the separation of duties that stands against the act. */
export interface Breach {
	readonly rule: 'S1' | 'S4' | 'S6' | 'S7' | 'S8';
	readonly words: string;
}

const breach = (rule: Breach['rule'], words: string): Breach => Object.freeze({ rule, words });

/** S1: whoever touched a model never acts on it as validator or head, and is never assigned to validate it. */
const touched = (action: Action, who: Who, { actor, model, person }: Facts): Breach | undefined => {
	if (!model || permissions[action].reads) return undefined;
	const judges = who === 'model-validator' || who === 'head';
	if (judges && actor.person !== 'system' && actor.person !== 'cli' && model.touched.has(actor.person))
		return breach('S1', `You worked on ${model.ref} within the look-back, so you cannot judge it.`);
	if (action === 'validation.assign' && person && model.touched.has(person.person))
		return breach('S1', `This person worked on ${model.ref} within the look-back and cannot validate it.`);
	return undefined;
};

const alone: readonly Role[] = ['admin', 'auditor'];

/** Whether a set of roles and relations can be one person's: admin and auditor stand alone, a head owns nothing. */
export const compatible = (roles: readonly Role[], parties: readonly Party[]): boolean => {
	if (roles.some((role) => alone.includes(role))) return roles.length === 1 && parties.length === 0;
	return (
		!roles.includes('head') || !(roles.includes('owner') || parties.some((party) => party !== 'validator'))
	);
};

/** S4: admins and auditors hold no other role; the head of model risk is never owner or developer. */
const mixed = (action: Action, { person, role, party }: Facts): Breach | undefined => {
	if (!person) return undefined;
	const gives = action === 'role.grant' || action === 'role.propose' || action === 'role.approve';
	const binds = action === 'party.grant' || action === 'validation.assign';
	const roles = gives && role ? [...new Set([...person.roles, role])] : person.roles;
	const relation = action === 'validation.assign' ? 'validator' : party;
	const parties = binds && relation ? [...person.parties, relation] : person.parties;
	if ((!gives && !binds) || compatible(roles, parties)) return undefined;
	return breach('S4', 'Admins and auditors hold no other role, and the head is never owner or developer.');
};

const forOthers: readonly Action[] = [
	'role.grant',
	'role.propose',
	'role.approve',
	'role.end',
	'party.grant',
	'party.end',
	'validation.assign',
	'person.disable',
	'person.re-enable',
	'recovery.start'
];

/** S6: nobody grants, approves, ends or re-enables for themselves; the two of a pair are two persons. */
const oneself = (action: Action, { actor, person, first }: Facts): Breach | undefined => {
	if (forOthers.includes(action) && person?.person === actor.person)
		return breach('S6', 'Nobody does this for themselves.');
	if (first !== undefined && first === actor.person)
		return breach('S6', 'The second of the two must be another person.');
	return undefined;
};

const endsAdmin = (action: Action, { person, role }: Facts): boolean =>
	person !== undefined &&
	person.roles.includes('admin') &&
	(action === 'person.disable' || (action === 'role.end' && role === 'admin'));

const aboveOwner: readonly Action[] = ['role.propose', 'role.approve'];

/** S7: two admins always; before the second has enrolled nothing above owner is granted. */
const twoAdmins = (action: Action, facts: Facts): Breach | undefined => {
	if (facts.actor.person === 'system') return undefined;
	if (endsAdmin(action, facts) && facts.person!.otherAdmins < 2)
		return breach('S7', 'Two admins must always remain.');
	if (aboveOwner.includes(action) && facts.admins < 2)
		return breach('S7', 'Before a second admin has enrolled, nothing above owner can be granted.');
	return undefined;
};

const signed: readonly Action[] = [
	'decision.sign',
	'finding.close',
	'validation.conclude',
	'role.grant',
	'role.propose',
	'role.approve',
	'party.grant',
	'person.re-enable',
	'recovery.start'
];

/** S8: for 24 hours after a recovery no decision, closure, conclusion or grant. */
const fresh = (action: Action, { recovered }: Facts): Breach | undefined =>
	recovered && signed.includes(action)
		? breach('S8', 'For 24 hours after a recovery nothing can be decided, closed, concluded or granted.')
		: undefined;

/** The first rule of the separation of duties that stands against the act, if any. */
export const separation = (action: Action, who: Who, facts: Facts): Breach | undefined =>
	touched(action, who, facts) ??
	oneself(action, facts) ??
	mixed(action, facts) ??
	twoAdmins(action, facts) ??
	fresh(action, facts);
