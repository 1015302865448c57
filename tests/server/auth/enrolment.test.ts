import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { verifyNewPasskey } from '$lib/server/auth/attestation';
import { AuthFault } from '$lib/server/auth/fault';
import { enrol, optionsForLink } from '$lib/server/people/enrolment';
import { firstLinks } from '$lib/server/people/first-start';
import { Invalid } from '$lib/domain/faults';
import type { PersonId } from '$lib/domain/actor';
import type { TestRegister } from '../../support/register';
import { Authenticator, cborMap, flags, type Bent, type Kind } from '../../support/authenticator';
import { bank, entries, enrolBy, origin, password, visitor } from '../people/bank';

let register: TestRegister;
let secret: string;
let person: PersonId;
let second: string;

beforeEach(async () => {
	register = await bank();
	const links = firstLinks(register.ctx);
	secret = links[0].url.split('#')[1]!;
	person = links[0].person;
	second = links[1].url;
});
afterEach(() => register.close());

const typed = () => ({
	secret,
	password,
	identity: { name: 'Marta Quill', mail: 'marta@bank.example', staffNumber: '1' }
});
const options = () => optionsForLink(register.ctx, visitor(), typed());

const answer = async (bent: Bent, kind: Kind = 'ES256'): Promise<string> => {
	const { challenge, user } = await options();
	return new Authenticator('localhost', kind).create({ challenge, origin, userHandle: user.id }, bent);
};

const refusal = async (text: string | Promise<string>): Promise<AuthFault> => {
	try {
		await verifyNewPasskey(register.ctx, await text, visitor().holder, person);
	} catch (fault) {
		if (fault instanceof AuthFault) return fault;
		throw fault;
	}
	throw new Error('The passkey was taken');
};

test('options ask for a discoverable passkey with verification, no attestation, our algorithms and host', async () => {
	expect(await options()).toMatchObject({
		rp: { id: 'localhost' },
		attestation: 'none',
		timeout: 300_000,
		authenticatorSelection: { residentKey: 'required', userVerification: 'required' },
		pubKeyCredParams: [{ alg: -8 }, { alg: -7 }, { alg: -257 }]
	});
	expect(Buffer.from((await options()).user.id, 'base64url')).toHaveLength(32);
});

describe('a new passkey is refused', () => {
	test('for another ceremony', async () => {
		expect(await refusal(answer({ type: 'webauthn.get' }))).toMatchObject({ reason: 'client data' });
	});
	test('for another challenge, and for one used before', async () => {
		const text = await answer({});
		await verifyNewPasskey(register.ctx, text, visitor().holder, person);
		expect(await refusal(text)).toMatchObject({ reason: 'challenge' });
		expect(await refusal(answer({ challenge: Buffer.alloc(32).toString('base64url') }))).toMatchObject({
			reason: 'challenge'
		});
	});
	test('for another origin, in a frame and under another page', async () => {
		expect(await refusal(answer({ origin: 'http://localhost:8080' }))).toMatchObject({
			message: 'The origin is not this register.'
		});
		expect(await refusal(answer({ more: { crossOrigin: true } }))).toMatchObject({
			message: 'The page stood inside another origin.'
		});
		expect(await refusal(answer({ more: { topOrigin: 'http://x.example' } }))).toMatchObject({
			message: 'The page stood under another origin.'
		});
	});
	test('for client data with a key twice', async () => {
		const text = answer({ clientData: (said) => said.replace('{', '{"origin":"http://x.example",') });
		expect(await refusal(text)).toMatchObject({ message: 'a key of the client data stands twice' });
	});
	test('for another host', async () => {
		expect(await refusal(answer({ rpId: 'x.example' }))).toMatchObject({
			message: 'The credential belongs to another host.'
		});
	});
	test('without presence or verification', async () => {
		expect(await refusal(answer({ flags: flags.uv }))).toMatchObject({
			message: 'The person was not present.'
		});
		expect(await refusal(answer({ flags: flags.up }))).toMatchObject({
			message: 'The person was not verified by the authenticator.'
		});
	});
	test('with backup flags that contradict each other', async () => {
		expect(await refusal(answer({ flags: flags.up | flags.uv | flags.bs }))).toMatchObject({
			reason: 'backup flag'
		});
	});
	test('with bytes behind', async () => {
		expect(await refusal(answer({ trailing: Buffer.of(1) }))).toMatchObject({
			message: expect.stringMatching(/Leftover/)
		});
	});
	test('when another id was attested than is named', async () => {
		expect(await refusal(answer({ attestedId: Buffer.alloc(16, 7) }))).toMatchObject({
			message: 'Another credential was attested than was named.'
		});
	});
	test('with an id over 1,023 bytes', async () => {
		const long = Buffer.alloc(1024, 7);
		const text = answer({ attestedId: long, id: long.toString('base64url') });
		expect(await refusal(text)).toMatchObject({ message: expect.stringMatching(/1,023/) });
	});
	test('when its key is enrolled already', async () => {
		const other = await enrolBy(register, second, {
			name: 'Noor Vance',
			mail: 'n@bank.example',
			staffNumber: '2'
		});
		expect(await refusal(answer({ key: other.device.keys.cose }))).toMatchObject({
			message: 'This credential is enrolled already.'
		});
	});
});

describe('a key is refused', () => {
	const x = Buffer.alloc(32, 1);
	const small = Buffer.concat([Buffer.of(1), Buffer.alloc(31)]);
	const rsa = (bytes: number, e: string) =>
		cborMap([
			[1, 3],
			[3, -257],
			[-1, Buffer.alloc(bytes, 0xff)],
			[-2, Buffer.from(e, 'hex')]
		]);
	test.each([
		[
			'off the curve',
			cborMap([
				[1, 2],
				[3, -7],
				[-1, 1],
				[-2, x],
				[-3, x]
			]),
			/not on its curve/
		],
		[
			'on another curve',
			cborMap([
				[1, 2],
				[3, -7],
				[-1, 2],
				[-2, x],
				[-3, x]
			]),
			/not a P-256 key/
		],
		[
			'with a parameter too many',
			cborMap([
				[1, 2],
				[3, -7],
				[-1, 1],
				[-2, x],
				[-3, x],
				[-4, x]
			]),
			/other parameters/
		],
		[
			'of small order',
			cborMap([
				[1, 1],
				[3, -8],
				[-1, 6],
				[-2, small]
			]),
			/small order/
		],
		[
			'with a short coordinate',
			cborMap([
				[1, 1],
				[3, -8],
				[-1, 6],
				[-2, x.subarray(1)]
			]),
			/parameter -2/
		],
		['RSA under 2,048 bits', rsa(128, '010001'), /2,048/],
		['RSA with exponent 3', rsa(256, '03'), /65537/],
		[
			'of another algorithm',
			cborMap([
				[1, 2],
				[3, -35],
				[-1, 2],
				[-2, x],
				[-3, x]
			]),
			/algorithm/
		]
	])('%s', async (_, key, words) => {
		expect((await refusal(answer({ key }))).message).toMatch(words);
	});
});

describe('a link', () => {
	const identity = { name: 'Marta Quill', mail: 'marta@bank.example', staffNumber: '1' };
	const sent = async () => ({ secret, password, response: await answer({}), identity });

	test('enrols once', async () => {
		await enrol(register.ctx, visitor(), await sent());
		expect(entries(register).map(({ type }) => type)).toEqual(
			expect.arrayContaining([
				'person.enrolled',
				'credential.enrolled',
				'password.set',
				'recovery-codes.made',
				'session.opened'
			])
		);
		await expect(options()).rejects.toThrow(AuthFault);
	});
	test('is over after 24 hours', async () => {
		register.clock.forward(24 * 3600_000);
		await expect(options()).rejects.toThrow(AuthFault);
	});
	test('survives what is typed wrongly', async () => {
		const weak = { ...(await sent()), password: 'short' };
		await expect(enrol(register.ctx, visitor(), weak)).rejects.toThrow(Invalid);
		const nameless = { ...(await sent()), identity: { ...identity, name: '' } };
		await expect(enrol(register.ctx, visitor(), nameless)).rejects.toThrow(Invalid);
		await enrol(register.ctx, visitor(), await sent());
	});
	test('that is guessed is limited an address', async () => {
		const guess = (n: number) =>
			optionsForLink(register.ctx, visitor(), { ...typed(), secret: `guess ${n}` });
		for (let n = 0; n < 10; n++) await expect(guess(n)).rejects.toThrow(AuthFault);
		await expect(guess(10)).rejects.toThrow(/Too many tries/);
		await expect(options()).rejects.toThrow(/Too many tries/);
		expect(await optionsForLink(register.ctx, visitor({ address: '198.51.100.9' }), typed())).toBeDefined();
	});
	test('stores only a digest', () => {
		const rows = register.ctx.read.all(register.ctx.read.q.selectFrom('enrolment_link').selectAll());
		expect(JSON.stringify(rows)).not.toContain(secret);
	});
});
