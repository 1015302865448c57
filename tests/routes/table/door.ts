import type { Row } from '../row';

const everybody = (status: number | readonly number[]) => ({
	anonymous: status,
	signedIn: status,
	recovery: status
});

/** The doors ask no permission: what they say depends on whether somebody is signed in. */
const open = { action: 'account.read', allowed: 200 } as const;

export const doorRows: readonly Row[] = [
	{ route: '/healthz', method: 'GET', ...open, door: everybody(200) },
	{
		route: '/(door)/sign-in',
		method: 'GET',
		...open,
		door: { anonymous: 200, signedIn: 303, recovery: 200 }
	},
	{
		route: '/(door)/sign-in',
		method: 'POST ?/passkey',
		...open,
		send: () => ({ form: { response: '{}' } }),
		notes: ['sign-in.failed'],
		door: everybody(401)
	},
	{
		route: '/(door)/sign-in',
		method: 'POST ?/seat',
		what: 'there are none in a real register',
		...open,
		send: (_, { people }) => ({ form: { person: people.owner } }),
		door: everybody(404)
	},
	{ route: '/(door)/sign-in/options', method: 'POST', ...open, door: everybody(200) },
	{ route: '/(door)/enrol', method: 'GET', ...open, door: everybody(200) },
	{ route: '/(door)/enrol', method: 'POST ?/open', ...open, door: everybody([401, 429]) },
	{ route: '/(door)/enrol', method: 'POST ?/enrol', ...open, door: everybody([401, 429]) },
	{ route: '/(door)/enrol/options', method: 'POST', ...open, door: everybody([401, 429]) },
	{ route: '/(door)/recovery', method: 'GET', ...open, door: everybody(200) },
	{
		route: '/(door)/recovery',
		method: 'POST',
		...open,
		send: () => ({ form: { mail: 'nobody@bank.example', password: 'wrong', code: 'wrong' } }),
		notes: ['sign-in.failed'],
		door: everybody([401, 429])
	},
	{
		route: '/(door)/recovery/passkey',
		method: 'GET',
		...open,
		door: { anonymous: 303, signedIn: 303, recovery: 200 }
	},
	{
		route: '/(door)/recovery/passkey',
		method: 'POST',
		...open,
		send: () => ({ form: { response: 'no passkey' } }),
		notes: ['access.refused'],
		door: { anonymous: 303, signedIn: 303, recovery: 400 }
	},
	{
		route: '/(door)/recovery/passkey/options',
		method: 'POST',
		...open,
		door: { anonymous: 401, signedIn: 401, recovery: 200 }
	}
];

/** Ends the sessions of the walk. */
export const lastRows: readonly Row[] = [
	{ route: '/(door)/sign-out', method: 'POST', ...open, notes: ['session.closed'], door: everybody(303) }
];
