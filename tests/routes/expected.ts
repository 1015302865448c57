import { actionOf, ruleOf, verdictOf, type Row, type Verdict } from './row';
import type { Case } from './cases';
import type { TokenName } from '../support/populated';
import type { Persona } from './personas';

/** What one persona must be answered at one address. */
export interface Expected {
	readonly word: Verdict | 'sign in' | 'no token here' | 'no such address' | 'open';
	readonly statuses: readonly number[];
	/** The refusal that must stand in the log. */
	readonly refusal?: { readonly person: string; readonly rule: string; readonly action?: string };
}

export type Group = 'desk' | 'door' | 'api';

/** The route group, as the guard sees it; what is in none is open like the door. */
export const groupOf = (route: string): Group =>
	route.startsWith('/(desk)') ? 'desk' : route.startsWith('/api/') ? 'api' : 'door';

const list = (statuses: number | readonly number[]): readonly number[] => [statuses].flat();

const judged = (row: Row, verdict: Verdict, person: string, rule: string, action?: string): Expected => {
	const refusal = { person, rule, ...(action !== undefined && { action }) };
	switch (verdict) {
		case 'allow':
			return { word: verdict, statuses: list(row.allowed) };
		case 'refuse':
			return { word: verdict, statuses: [403], refusal };
		case 'hide':
			return { word: verdict, statuses: [404], refusal };
		case 'absent':
			return { word: verdict, statuses: [404] };
	}
};

type Known = Exclude<Persona, { kind: 'anonymous' | 'over' }>;

const verdictAt = (row: Row, { reference }: Case, persona: Known): Verdict => {
	if (row.blind) return verdictOf(row, persona.own);
	if (reference === 'absent' && !row.judgedFirst) return 'absent';
	if (reference === 'absent part' && row.partFirst) return 'absent';
	const verdict = verdictOf(row, reference === 'other' ? persona.other : persona.own);
	return reference.startsWith('absent') && verdict === 'allow' ? 'absent' : verdict;
};

const ofPerson = (row: Row, at: Case, persona: Known): Expected => {
	const standing = at.reference === 'other' ? persona.other : persona.own;
	const found = { ...row, allowed: row.finds?.[standing] ?? row.allowed };
	const verdict = verdictAt(row, at, persona);
	return judged(found, verdict, persona.person, ruleOf(row, standing), actionOf(row, standing));
};

const dead: readonly TokenName[] = ['leaver', 'expired', 'revoked'];

const ofToken = (row: Row, at: Case, persona: Extract<Persona, { kind: 'token' }>): Expected => {
	const { scope, person } = persona;
	if (dead.includes(scope)) return { word: 'sign in', statuses: [401] };
	if (scope !== 'every' && scope !== row.scope)
		return judged(row, 'refuse', person, 'token-scope', `api:${row.scope}`);
	const standing = at.reference === 'other' ? persona.other : persona.own;
	const rule = row.tokenRules?.[scope];
	// Whoever is refused an earlier act is refused that.
	const reached = !at.reference.startsWith('absent') && row.actions?.[standing] === undefined;
	return rule !== undefined && reached
		? judged(row, 'refuse', person, rule, row.action)
		: ofPerson(row, at, persona);
};

const atDoor = ({ door }: Row, persona: Persona): Expected => {
	if (persona.kind === 'token') return { word: 'no token here', statuses: [400] };
	const { anonymous, signedIn, recovery } = door!;
	const who = { anonymous, over: anonymous, session: signedIn, recovery }[persona.kind];
	return { word: 'open', statuses: list(who) };
};

/** A recovery session may do what its row says, and else nothing. */
const inRecovery = (row: Row, { reference }: Case, { person, own }: Known): Expected => {
	const unknown = reference === 'absent' && !row.blind && !row.judgedFirst && !row.lists;
	if (unknown || (reference === 'absent part' && row.partFirst)) return judged(row, 'absent', person, '');
	return row.recovery === undefined
		? judged(row, 'refuse', person, 'recovery')
		: judged(row, row.recovery, person, ruleOf(row, own));
};

/** The answer that the table, the guard and the separation of duties give. */
export const expectedOf = (row: Row, at: Case, persona: Persona): Expected => {
	const group = groupOf(row.route);
	if (persona.kind === 'token' && group === 'desk') return { word: 'no token here', statuses: [400] };
	if (at.reference === 'malformed') return { word: 'no such address', statuses: [404] };
	if (group === 'door') return atDoor(row, persona);
	switch (persona.kind) {
		case 'token':
			return ofToken(row, at, persona);
		case 'session':
			return ofPerson(row, at, persona);
		case 'recovery':
			return inRecovery(row, at, persona);
		case 'anonymous':
		case 'over':
			return { word: 'sign in', statuses: [group === 'api' ? 401 : 303] };
	}
};
