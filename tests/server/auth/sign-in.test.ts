import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { verifyAssertion } from '$lib/server/auth/assertion';
import { AuthFault } from '$lib/server/auth/fault';
import { signInOptions } from '$lib/server/auth/options';
import { secretHash } from '$lib/server/auth/secret';
import { signInWithPasskey } from '$lib/server/people/sign-in';
import type { TestRegister } from '../../support/register';
import { Authenticator, flags, type Bent } from '../../support/authenticator';
import { bank, entries, enrolBy, origin, signIn, twoAdmins, visitor, type Enrolled } from '../people/bank';

let register: TestRegister;
let marta: Enrolled;
let noor: Enrolled;

// One bank for all: what is refused leaves nothing behind.
beforeAll(async () => {
	register = await bank();
	[marta, noor] = await twoAdmins(register);
});
afterAll(() => register.close());

/** The reason and words with which an answer is refused. */
const refusal = async (bent: Bent, device: Authenticator = marta.device): Promise<AuthFault> => {
	const { ctx } = register;
	const { holder } = visitor();
	const { challenge } = await signInOptions(ctx, holder);
	return answerTo(device.get({ challenge, origin }, bent));
};

const answerTo = async (text: string): Promise<AuthFault> => {
	try {
		await verifyAssertion(register.ctx, text, 'sign-in', visitor().holder);
	} catch (fault) {
		if (fault instanceof AuthFault) return fault;
		throw fault;
	}
	throw new Error('The answer was taken');
};

const changed = (
	text: string,
	change: (answer: { response: Record<string, string>; id: string }) => void
): string => {
	const answer = JSON.parse(text) as { response: Record<string, string>; id: string };
	change(answer);
	return JSON.stringify(answer);
};

const fresh = async (bent: Bent = {}): Promise<string> => {
	const { challenge } = await signInOptions(register.ctx, visitor().holder);
	return marta.device.get({ challenge, origin }, bent);
};

test('a good answer opens a session', async () => {
	expect(await signIn(register, marta.device)).toMatch(/^[a-z2-7]{32}$/);
	const last = entries(register).at(-1)!;
	expect(last.type).toBe('session.opened');
	expect(last.actor).toBe(marta.person);
});

test.each(['EdDSA', 'RS256'] as const)('a key of kind %s signs in', async (kind) => {
	const other = await bank();
	const { firstLinks } = await import('$lib/server/people/first-start');
	const [first] = firstLinks(other.ctx);
	const who = { name: 'Ilse Brand', mail: 'ilse@bank.example', staffNumber: '1' };
	const { device } = await enrolBy(other, first.url, who, kind);
	expect(await signIn(other, device)).toBeDefined();
	other.close();
});

describe('1: form of the answer', () => {
	test('over 16 KiB', async () => {
		const fault = await answerTo(JSON.stringify({ id: 'x'.repeat(17_000) }));
		expect(fault).toMatchObject({ reason: 'request', message: expect.stringMatching(/16 KiB/) });
	});
	test('not JSON', async () => {
		expect(await answerTo('{"id"')).toMatchObject({ message: 'The answer is not JSON.' });
	});
	test('a part is missing', async () => {
		const text = changed(await fresh(), ({ response }) => delete response['signature']);
		expect(await answerTo(text)).toMatchObject({ message: expect.stringMatching(/lacks a part/) });
	});
	test.each(['clientDataJSON', 'authenticatorData', 'signature'])('%s with padding', async (field) => {
		const text = changed(await fresh(), ({ response }) => (response[field] += '='));
		expect(await answerTo(text)).toMatchObject({
			reason: 'request',
			message: `${field} is not base64url without padding.`
		});
	});
	test('a signature that does not encode back to itself', async () => {
		const text = changed(await fresh({ signature: (good) => good.subarray(0, 67) }), ({ response }) => {
			const last = response['signature']!.at(-1)!;
			const next = String.fromCharCode(last.charCodeAt(0) + 1);
			response['signature'] = response['signature']!.slice(0, -1) + next;
		});
		expect(await answerTo(text)).toMatchObject({ reason: 'request' });
	});
	test('the two ids differ', async () => {
		expect(await refusal({ rawId: 'AAAA' })).toMatchObject({ message: 'The two ids of the answer differ.' });
	});
	test('client data with a key twice', async () => {
		const fault = await refusal({ clientData: (said) => said.replace('{', '{"type":"webauthn.get",') });
		expect(fault).toMatchObject({ reason: 'client data', message: 'a key of the client data stands twice' });
	});
	test('client data with a key twice, one of them escaped', async () => {
		const fault = await refusal({
			clientData: (said) => said.replace('{', '{"\\u006frigin":"https://elsewhere.example",')
		});
		expect(fault).toMatchObject({ message: 'a key of the client data stands twice' });
	});
	test('client data that is not UTF-8', async () => {
		const fault = await refusal({
			clientData: (said) =>
				Buffer.concat([
					Buffer.from(said.slice(0, -1)),
					Buffer.from(',"x":"'),
					Buffer.of(0xff),
					Buffer.from('"}')
				])
		});
		expect(fault).toMatchObject({ message: 'the client data is not JSON in UTF-8' });
	});
	test('client data with a byte order mark', async () => {
		expect(await refusal({ clientData: (said) => `\ufeff${said}` })).toMatchObject({ reason: 'client data' });
	});
	test('another ceremony', async () => {
		expect(await refusal({ type: 'webauthn.create' })).toMatchObject({
			message: expect.stringMatching(/The ceremony is/)
		});
	});
});

describe('2: challenge', () => {
	test('another one', async () => {
		expect(await refusal({ challenge: Buffer.alloc(32).toString('base64url') })).toMatchObject({
			reason: 'challenge'
		});
	});
	test('of another length', async () => {
		const fault = await refusal({ challenge: 'AAAA' });
		expect(fault).toMatchObject({ message: 'The challenge is not 32 bytes in base64url.' });
	});
	test('used before', async () => {
		const text = await fresh();
		await verifyAssertion(register.ctx, text, 'sign-in', visitor().holder);
		expect(await answerTo(text)).toMatchObject({ message: 'The challenge is unknown or was used.' });
	});
	test('used before, also when that failed', async () => {
		const { challenge } = await signInOptions(register.ctx, visitor().holder);
		const asked = { challenge, origin };
		expect(await answerTo(marta.device.get(asked, { origin: 'https://elsewhere.example' }))).toMatchObject({
			reason: 'client data'
		});
		expect(await answerTo(marta.device.get(asked))).toMatchObject({
			message: 'The challenge is unknown or was used.'
		});
	});
	test('dropped when the answer is too broken to name it', async () => {
		const { challenge } = await signInOptions(register.ctx, visitor().holder);
		await answerTo('{');
		expect(await answerTo(marta.device.get({ challenge, origin }))).toMatchObject({ reason: 'challenge' });
	});
	test('of another browser', async () => {
		const { challenge } = await signInOptions(register.ctx, secretHash('another door'));
		expect(await answerTo(marta.device.get({ challenge, origin }))).toMatchObject({ reason: 'challenge' });
	});
	test('over after five minutes', async () => {
		const text = await fresh();
		register.clock.forward(5 * 60_000);
		expect(await answerTo(text)).toMatchObject({ message: 'The challenge is over.' });
	});
});

describe('3 and 4: origin and framing', () => {
	test.each([
		'http://localhost:3001',
		'https://localhost:3000',
		'http://localhost',
		'http://a.localhost:3000'
	])('%s', async (bad) => {
		expect(await refusal({ origin: bad })).toMatchObject({ message: 'The origin is not this register.' });
	});
	test('crossOrigin', async () => {
		const fault = await refusal({ more: { crossOrigin: true } });
		expect(fault).toMatchObject({ message: 'The page stood inside another origin.' });
	});
	test('topOrigin', async () => {
		const fault = await refusal({ more: { topOrigin: 'https://elsewhere.example' } });
		expect(fault).toMatchObject({ message: 'The page stood under another origin.' });
	});
	test('5: a token binding is ignored', async () => {
		expect(
			await signIn(register, marta.device, { more: { tokenBinding: { status: 'supported' } } })
		).toBeDefined();
	});
});

describe('6 to 8: authenticator data', () => {
	test('another host', async () => {
		const fault = await refusal({ rpId: 'elsewhere.example' });
		expect(fault).toMatchObject({ message: 'The credential belongs to another host.' });
	});
	test('bytes behind', async () => {
		const fault = await refusal({ trailing: Buffer.of(0) });
		expect(fault).toMatchObject({ reason: 'authenticator data', message: expect.stringMatching(/Leftover/) });
	});
	test('extension flag without extensions', async () => {
		expect(await refusal({ flags: flags.up | flags.uv | flags.ed })).toMatchObject({
			reason: 'authenticator data'
		});
	});
	test('cut', async () => {
		const text = changed(
			await fresh(),
			({ response }) => (response['authenticatorData'] = Buffer.alloc(36).toString('base64url'))
		);
		expect(await answerTo(text)).toMatchObject({ message: 'The authenticator data are cut.' });
	});
	test('reserved flag bits are ignored', async () => {
		expect(await signIn(register, marta.device, { flags: flags.up | flags.uv | 2 | 32 })).toBeDefined();
	});
	test('not present', async () => {
		expect(await refusal({ flags: flags.uv })).toMatchObject({ message: 'The person was not present.' });
	});
	test('not verified', async () => {
		const fault = await refusal({ flags: flags.up });
		expect(fault).toMatchObject({ message: 'The person was not verified by the authenticator.' });
	});
	test('backed up but not eligible', async () => {
		expect(await refusal({ flags: flags.up | flags.uv | flags.bs })).toMatchObject({ reason: 'backup flag' });
	});
	test('eligibility for backup changed: refused and entered', async () => {
		const text = await fresh({ flags: flags.up | flags.uv | flags.be });
		expect(await signInWithPasskey(register.ctx, visitor(), text)).toBeUndefined();
		const entry = entries(register).find(({ type }) => type === 'credential.backup-changed');
		expect(entry?.payload).toMatchObject({ person: marta.person, enrolled: false, received: true });
	});
});

describe('9 and 10: whose passkey', () => {
	test('unknown', async () => {
		const stranger = new Authenticator('localhost');
		stranger.userHandle = marta.device.userHandle;
		expect(await refusal({}, stranger)).toMatchObject({ reason: 'unknown credential' });
	});
	test('named as another person’s', async () => {
		const fault = await refusal({
			id: noor.device.id.toString('base64url'),
			userHandle: noor.device.userHandle
		});
		expect(fault).toMatchObject({ reason: 'signature' });
	});
	test('no user handle', async () => {
		expect(await refusal({ userHandle: undefined })).toMatchObject({
			message: expect.stringMatching(/sends its user handle/)
		});
	});
	test('another person’s user handle', async () => {
		expect(await refusal({ userHandle: noor.device.userHandle })).toMatchObject({ reason: 'user handle' });
	});
	test('a broken signature', async () => {
		const fault = await refusal({
			signature: (good) => {
				good[good.length - 1]! ^= 1;
				return good;
			}
		});
		expect(fault).toMatchObject({ reason: 'signature' });
	});
});

describe('12: counter', () => {
	/** A passkey that answers with these counts, one after the other; what was entered about it. */
	const entered = async (...counts: readonly number[]): Promise<unknown[]> => {
		const own = await bank();
		const { firstLinks } = await import('$lib/server/people/first-start');
		const who = { name: 'Ilse Brand', mail: 'ilse@bank.example', staffNumber: '1' };
		const { device } = await enrolBy(own, firstLinks(own.ctx)[0].url, who);
		for (const counter of counts) expect(await signIn(own, device, { counter })).toBeDefined();
		const fell = entries(own).filter(({ type }) => type === 'credential.counter-fell');
		own.close();
		return fell.map(({ payload }) => payload);
	};
	test('rises', async () => expect(await entered(5, 6)).toEqual([]));
	test('stays at nought, as with synced passkeys', async () => expect(await entered(0, 0)).toEqual([]));
	test.each([5, 3, 0])('5, then %i: taken, marked and entered', async (received) => {
		expect(await entered(5, received)).toMatchObject([{ stored: 5, received }]);
	});
});
