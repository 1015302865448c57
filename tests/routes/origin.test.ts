import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ask, type Answer } from './ask';
import { openBank, type Bank } from './bank';

let bank: Bank;

beforeAll(async () => {
	bank = await openBank();
});
afterAll(() => bank.close());

const cookie = (): string => `keelbook-local=${bank.sessions.owner}`;

/** Origins a browser could send, by name; undefined where it sends none. */
const origins = (): Readonly<Record<string, string | undefined>> => {
	const { port } = new URL(bank.origin);
	return {
		same: bank.origin,
		absent: undefined,
		null: 'null',
		other: 'https://other.example',
		'sub-domain': `http://evil.localhost:${port}`,
		'longer name': `${bank.origin}.evil.example`,
		'other port': `http://localhost:${Number(port) + 1}`,
		'other scheme': `https://localhost:${port}`,
		address: `http://127.0.0.1:${port}`,
		'upper case': bank.origin.toUpperCase(),
		'with a path': `${bank.origin}/`
	};
};

const sites = [undefined, 'same-origin', 'same-site', 'cross-site', 'none'];
const types = [
	'application/x-www-form-urlencoded',
	'multipart/form-data; boundary=limit',
	'text/plain',
	'application/json',
	'text/csv',
	undefined
];
const unsafe = ['POST', 'PUT', 'PATCH', 'DELETE'];

interface Sent {
	readonly method: string;
	readonly path: string;
	readonly origin: string | undefined;
	readonly site: string | undefined;
	readonly type: string | undefined;
}

const send = ({ method, path, origin, site, type }: Sent): Promise<Answer> =>
	ask(bank.origin, {
		method,
		path,
		body: 'kind=none',
		headers: {
			cookie: cookie(),
			accept: 'text/html',
			...(origin !== undefined && { origin }),
			...(site !== undefined && { 'sec-fetch-site': site }),
			...(type !== undefined && { 'content-type': type })
		}
	});

/** Every request of the matrix for one address that is answered though it must not, or not though it must. */
const wrongOf = async (path: string): Promise<string[]> => {
	const wrong: string[] = [];
	for (const method of unsafe)
		for (const [name, origin] of Object.entries(origins()))
			for (const site of sites)
				for (const type of types) {
					const { status } = await send({ method, path, origin, site, type });
					const mine = name === 'same' && (site === undefined || site === 'same-origin');
					if ((status === 403) === mine) wrong.push(`${method} ${type} from ${name}, ${site}: ${status}`);
				}
	return wrong;
};

describe('a request that changes something', () => {
	it('comes from a page of the register: form action', async () => {
		const wrong = await wrongOf('/account?/end-session');
		expect(wrong, wrong.join('\n')).toEqual([]);
	});

	it('comes from a page of the register: API by cookie', async () => {
		const wrong = await wrongOf('/api/v1/models');
		expect(wrong, wrong.join('\n')).toEqual([]);
	});

	it('enters nothing when it comes from elsewhere', async () => {
		const before = bank.entriesAfter(-1).length;
		const elsewhere = { origin: 'https://other.example', site: 'cross-site', type: 'application/json' };
		await send({ method: 'POST', path: '/api/v1/models', ...elsewhere });
		await send({ method: 'POST', path: '/sign-out', ...elsewhere });
		expect(bank.entriesAfter(-1)).toHaveLength(before);
	});

	it('is a GET from anywhere, which changes nothing', async () => {
		const before = bank.entriesAfter(-1).length;
		for (const path of ['/', '/models', '/account', '/log', '/api/v1/models', '/sign-out', '/account?/sign'])
			await ask(bank.origin, { path, headers: { cookie: cookie(), origin: 'https://other.example' } });
		expect(bank.entriesAfter(-1)).toHaveLength(before);
	});

	it('is not made by a prefetch', async () => {
		for (const path of ['/', `/data/${bank.own.dataset}/1/file`]) {
			const headers = { cookie: cookie(), 'sec-purpose': 'prefetch;prerender' };
			expect((await ask(bank.origin, { path, headers })).status).toBe(204);
		}
	});

	it('is what it says: a method header overrides nothing', async () => {
		const headers = {
			cookie: cookie(),
			'x-http-method-override': 'DELETE',
			'x-forwarded-host': 'other.example'
		};
		expect((await ask(bank.origin, { path: '/account', headers })).status).toBe(200);
	});
});

describe('a token', () => {
	const authorization = (): string => `Bearer ${bank.tokens.every}`;

	it('needs no origin, and is answered whatever origin is sent', async () => {
		for (const origin of Object.values(origins())) {
			const { status } = await ask(bank.origin, {
				method: 'POST',
				path: '/api/v1/models',
				body: '{}',
				headers: {
					authorization: authorization(),
					'content-type': 'application/json',
					...(origin !== undefined && { origin })
				}
			});
			expect(status).toBe(400);
		}
	});

	it('is sent alone: beside a cookie it is refused', async () => {
		const headers = { authorization: authorization(), cookie: cookie(), origin: bank.origin };
		for (const path of ['/api/v1/models', '/api/v1/log', '/api/v1/models/M-1']) {
			const { status } = await ask(bank.origin, { path, headers });
			expect(status, path).toBe(path.endsWith('M-1') ? 404 : 400);
		}
	});

	it('opens no page and no door', async () => {
		for (const path of ['/', '/models', '/account', '/sign-in', '/log/checkpoint.txt']) {
			const answer = await ask(bank.origin, { path, headers: { authorization: authorization() } });
			expect(answer.status, path).toBe(400);
		}
	});

	it('is read in the header alone, and only whole', async () => {
		const token = bank.tokens.read;
		const tries: Record<string, string>[] = [
			{ authorization: token },
			{ authorization: `Basic ${token}` },
			{ authorization: `Bearer ${token}x` },
			{ authorization: `Bearer ${token.slice(0, -1)}` },
			{ authorization: `Bearer ${token.toUpperCase()}` },
			{ authorization: 'Bearer ' },
			{ 'x-api-key': token },
			{ cookie: `keelbook-local=${token}` }
		];
		for (const headers of tries) {
			const { status } = await ask(bank.origin, { path: '/api/v1/models', headers });
			expect(status, JSON.stringify(headers)).toBe(401);
		}
	});
});

describe('after signing in', () => {
	const lead = async (next: string): Promise<string | undefined> => {
		const { headers } = await ask(bank.origin, {
			path: `/sign-in?next=${next}`,
			headers: { cookie: cookie() }
		});
		return headers.location;
	};

	it('one is led to a page of the register', async () => {
		expect(await lead('/models')).toBe('/models');
		expect(await lead(encodeURIComponent('/runs?state=finished'))).toBe('/runs?state=finished');
	});

	it.each([
		['two slashes', '//other.example'],
		['slash and backslash', '/\\other.example'],
		['a scheme', 'https:other.example'],
		['a whole address', 'https://other.example/'],
		['a tab', '/\t/other.example'],
		['an encoded tab', '/%09/other.example'],
		['dots and two slashes', '/..//other.example'],
		['a line', '/models\r\nset-cookie: a=b'],
		['a script', 'javascript:alert(1)'],
		['data', 'data:text/html,x'],
		['a name', 'other.example'],
		['a user', '/@other.example'],
		['two thousand characters', `/models?${'a'.repeat(2000)}`],
		['another alphabet', '/mоdels'],
		['the API', '/api/v1/models'],
		['signing out', '/sign-out'],
		['nothing', '']
	])('one is led nowhere else: %s', async (_, next) => {
		expect(await lead(encodeURIComponent(next))).toBe('/');
	});

	it('a header of the host leads nowhere else either', async () => {
		const { headers } = await ask(bank.origin, {
			path: '/models',
			headers: { host: 'other.example', 'x-forwarded-host': 'other.example', 'x-forwarded-proto': 'https' }
		});
		expect(headers.location).toBe('/sign-in?next=%2Fmodels');
	});
});
