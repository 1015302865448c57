import { admins, type Body, type Row, type Standing } from '../row';
import type { Populated, Subject } from '../../support/populated';

const people = '/(desk)/people';
const one = '/(desk)/people/[person=person]';
const account = '/(desk)/account';

/** Who sees the directory. */
const overseers: readonly Standing[] = [...admins, 'validator', 'otherValidator', 'head', 'auditor'];

type Fields = Readonly<Record<string, string | readonly string[]>>;

/** A form of an act upon somebody, which comes back with the statement to sign. */
const acting =
	(kind: string, who: keyof Populated['people'], more: Fields = {}) =>
	(_: Subject, bank: Populated): Body => ({ form: { kind, person: bank.people[who], ...more } });

/** What admins prepare; nothing is entered before it is signed. */
const prepare = { route: people, method: 'POST ?/prepare', allows: admins, allowed: 200 } as const;

/** The rules that stop the first admin, where the second is allowed. */
const notHerself = { rules: { admin: 'S6' }, but: { admin: 'refuse' } } as const;

const acts: readonly Row[] = [
	{
		...prepare,
		what: 'invite',
		action: 'person.invite',
		send: () => ({
			form: { kind: 'invite', name: 'New Person', mail: 'new@bank.example', staffNumber: '77' }
		})
	},
	{
		...prepare,
		what: 'renew the invitation of somebody enrolled',
		action: 'person.invite',
		send: acting('renew-invitation', 'stranger'),
		allowed: 409
	},
	{
		...prepare,
		what: 'grant owner',
		action: 'role.grant',
		send: acting('grant', 'stranger', { role: 'owner' })
	},
	{
		...prepare,
		what: 'grant head',
		action: 'role.propose',
		send: acting('grant', 'stranger', { role: 'head' })
	},
	{
		...prepare,
		what: 'grant an owner the role of admin',
		action: 'role.propose',
		send: acting('grant', 'owner', { role: 'admin' }),
		allows: [],
		rules: { admin: 'S4', secondAdmin: 'S4' }
	},
	{
		...prepare,
		what: 'grant the admin a further role',
		action: 'role.grant',
		send: acting('grant', 'admin', { role: 'owner' }),
		allows: [],
		rules: { admin: 'S6', secondAdmin: 'S4' }
	},
	{
		...prepare,
		what: 'approve what the admin proposed',
		action: 'role.approve',
		send: (_, { proposal }) => ({ form: { kind: 'approve', proposal: String(proposal) } }),
		...notHerself
	},
	{ ...prepare, what: 're-enable', action: 'person.re-enable', send: acting('re-enable', 'leaver') },
	{ ...prepare, what: 'recover', action: 'recovery.start', send: acting('recover', 'stranger') },
	{
		...prepare,
		what: 'end a role',
		action: 'role.end',
		send: acting('end-role', 'otherValidator', { role: 'validator' })
	},
	{
		...prepare,
		what: 'end the role of one of the two admins',
		action: 'role.end',
		send: acting('end-role', 'admin', { role: 'admin' }),
		allows: [],
		rules: { admin: 'S6', secondAdmin: 'S7' }
	},
	{ ...prepare, what: 'disable', action: 'person.disable', send: acting('disable', 'stranger') },
	{
		...prepare,
		what: 'disable one of the two admins',
		action: 'person.disable',
		send: acting('disable', 'admin'),
		allows: [],
		rules: { admin: 'S6', secondAdmin: 'S7' }
	},
	{ ...prepare, what: 'end sessions', action: 'session.end-all', send: acting('end-sessions', 'stranger') },
	{
		...prepare,
		what: 'revoke the passkey of another',
		action: 'credential.revoke',
		send: acting('revoke-passkey', 'leaver', { credential: 'AAAA' })
	},
	{
		...prepare,
		what: 'revoke the token of another',
		action: 'token.revoke',
		send: (_, { people: { leaver } }) => ({
			form: { kind: 'revoke-token', person: leaver, token: 'aaaaaaaaaa' }
		}),
		// There is no such token.
		allowed: 404
	},
	{
		...prepare,
		what: 'renew the recovery codes of another',
		action: 'recovery-codes.renew',
		send: acting('renew-codes', 'leaver'),
		allows: []
	},
	{
		...prepare,
		what: 'make a token for another',
		action: 'token.create',
		send: acting('create-token', 'leaver', { scopes: ['read'], days: '30', label: 'for somebody else' }),
		allows: []
	}
];

/** Nobody has signed: the signature is judged before anything else. */
const unsigned = {
	action: 'step-up',
	allows: [],
	allowed: 403,
	rule: 'step-up',
	recovery: 'refuse',
	send: acting('disable', 'stranger', { challenge: 'AAAA', response: '{}' })
} as const;

const directory: readonly Row[] = [
	{ route: people, method: 'GET', action: 'people.read', allows: overseers, allowed: 200 },
	...acts,
	{ route: people, method: 'POST ?/sign', ...unsigned },
	{
		route: one,
		method: 'GET',
		action: 'people.read',
		allows: overseers,
		allowed: 200,
		about: 'person',
		judgedFirst: true
	},
	{
		route: one,
		method: 'POST ?/prepare',
		action: 'session.end-all',
		send: acting('end-sessions', 'stranger'),
		allows: admins,
		allowed: 200,
		about: 'person',
		blind: true
	},
	{ route: one, method: 'POST ?/sign', ...unsigned, about: 'person', blind: true },
	{
		route: people,
		method: 'POST ?/withdraw',
		action: 'grant.withdraw',
		send: (_, { proposal }) => ({ form: { proposal: String(proposal) } }),
		allows: admins,
		allowed: [303, 409],
		entersOnce: ['grant.withdrawn']
	}
];

const own: readonly Row[] = [
	{ route: account, method: 'GET', action: 'account.read', allowed: 200, recovery: 'allow' },
	{
		route: account,
		method: 'POST ?/prepare',
		what: 'new recovery codes for somebody else',
		action: 'recovery-codes.renew',
		send: acting('renew-codes', 'leaver'),
		allows: [],
		allowed: 200
	},
	{
		route: account,
		method: 'POST ?/prepare',
		what: 'a token of the owner’s',
		action: 'token.create',
		send: acting('create-token', 'owner', { scopes: ['read'], days: '30', label: 'for a report' }),
		allows: ['owner'],
		allowed: 200
	},
	{ route: account, method: 'POST ?/sign', ...unsigned },
	{ route: account, method: 'POST ?/add', ...unsigned },
	{
		route: account,
		method: 'POST ?/receive',
		action: 'credential.enrol',
		send: () => ({ form: { response: 'no passkey' } }),
		allows: [],
		allowed: 403,
		rule: 'passkey',
		recovery: 'refuse'
	},
	{
		route: account,
		method: 'POST ?/end-session',
		action: 'session.end',
		send: () => ({ form: { session: 's_aaaaaaaaaaaaaaaa' } }),
		// Whoever asks has no such session.
		allowed: 404,
		recovery: 'allow'
	},
	{
		route: '/(desk)/account/passkey-options',
		method: 'POST',
		action: 'credential.enrol',
		allowed: 200,
		recovery: 'allow'
	}
];

export const peopleRows: readonly Row[] = [...directory, ...own];
