import type { Cast, Populated, TokenName } from '../support/populated';
import type { Standing } from './row';

/** Somebody who asks: the credential they send, and what they are to each of the two models. */
export type Persona =
	| { readonly name: string; readonly kind: 'anonymous'; readonly cookie?: never }
	| { readonly name: string; readonly kind: 'over'; readonly cookie: string }
	| {
			readonly name: string;
			readonly kind: 'session';
			readonly person: string;
			readonly cookie: string;
			readonly own: Standing;
			readonly other: Standing;
	  }
	| {
			readonly name: string;
			readonly kind: 'recovery';
			readonly person: string;
			readonly cookie: string;
			readonly own: Standing;
			readonly other: Standing;
	  }
	| {
			readonly name: string;
			readonly kind: 'token';
			readonly token: string;
			readonly scope: TokenName;
			readonly person: string;
			readonly own: Standing;
			readonly other: Standing;
	  };

/** What each person is to M-001 and to M-002. */
const cast: Readonly<Partial<Record<Cast, readonly [own: Standing, other: Standing]>>> = {
	owner: ['owner', 'otherOwner'],
	developer: ['developer', 'otherDeveloper'],
	validator: ['validator', 'otherValidator'],
	otherOwner: ['otherOwner', 'owner'],
	secondValidator: ['otherValidator', 'validator'],
	otherValidator: ['otherValidator', 'otherValidator'],
	head: ['head', 'head'],
	auditor: ['auditor', 'auditor'],
	admin: ['admin', 'admin'],
	secondAdmin: ['secondAdmin', 'secondAdmin'],
	stranger: ['stranger', 'stranger'],
	formerOwner: ['stranger', 'stranger'],
	formerValidator: ['stranger', 'stranger']
};

export const personasOf = ({ people, sessions, tokens }: Populated): readonly Persona[] => [
	{ name: 'nobody signed in', kind: 'anonymous' },
	{ name: 'a person who was disabled', kind: 'over', cookie: sessions.leaver },
	{ name: 'an expired session', kind: 'over', cookie: sessions.expired },
	...(Object.keys(cast) as Cast[]).map((name): Persona => {
		const [own, other] = cast[name]!;
		return { name, kind: 'session', person: people[name], cookie: sessions[name], own, other };
	}),
	{
		name: 'the owner in recovery',
		kind: 'recovery',
		person: people.owner,
		cookie: sessions.recovery,
		own: 'owner',
		other: 'otherOwner'
	},
	...(Object.keys(tokens) as TokenName[]).map((scope): Persona => ({
		name: `a token: ${scope}`,
		kind: 'token',
		token: tokens[scope],
		scope,
		person: people.owner,
		own: 'owner',
		other: 'otherOwner'
	}))
];
