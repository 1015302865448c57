import { describe, expect, test } from 'vitest';
import { canonical } from '$lib/chain/canonical';
import {
	BadStepUp,
	challengeOf,
	readStatement,
	statementText,
	strictDer,
	verifyStepUp,
	type Statement
} from '$lib/chain/step-up';
import type { StepUp } from '$lib/domain/entry';
import { Authenticator, flags, type Bent, type Kind } from '../support/authenticator';

const origin = 'https://keelbook.bank.example';
const statement: Statement = {
	action: 'role.grant',
	at: '2026-03-02T09:00:00.000Z',
	by: 'p_aaaaaaaaaaaaaaaaaaaaaaaaaa',
	decision: 'grant',
	digests: [
		{ name: 'payload', sha256: `sha256:${'0'.repeat(64)}` },
		{ name: 'report', sha256: `sha256:${'f'.repeat(64)}` }
	],
	log: { root: 'xHk=', size: 7 },
	nonce: 'AAAAAAAAAAAAAAAAAAAAAA',
	register: 'keelbook.bank.example/keelbook/0123456789abcdef',
	subject: 'p_bbbbbbbbbbbbbbbbbbbbbbbbbb',
	v: 1
};
const text = statementText(statement);

const signed = (bent: Bent = {}, kind: Kind = 'ES256', of = text): { stepUp: StepUp; key: string } => {
	const device = new Authenticator('keelbook.bank.example', kind);
	const answer = JSON.parse(
		device.get({ challenge: challengeOf(of).toString('base64url'), origin }, bent)
	) as {
		id: string;
		response: { authenticatorData: string; clientDataJSON: string; signature: string };
	};
	const { authenticatorData, clientDataJSON, signature } = answer.response;
	return {
		stepUp: { statement: of, credential: answer.id, authenticatorData, clientDataJSON, signature },
		key: device.keys.cose.toString('base64url')
	};
};

const refusal = ({ stepUp, key }: ReturnType<typeof signed>, change: Partial<StepUp> = {}): string => {
	try {
		verifyStepUp({ ...stepUp, ...change }, key, origin);
	} catch (fault) {
		if (fault instanceof BadStepUp) return fault.message;
		throw fault;
	}
	return 'verified';
};

test.each(['ES256', 'EdDSA', 'RS256'] as const)('%s verifies offline', (kind) => {
	const { stepUp, key } = signed({}, kind);
	expect(verifyStepUp(stepUp, key, origin)).toEqual(statement);
});

describe('does not verify', () => {
	test('another statement', () => {
		const other = statementText({ ...statement, decision: 'end' });
		expect(refusal(signed(), { statement: other })).toMatch(/challenge/);
	});
	test('another key', () => {
		expect(refusal({ stepUp: signed().stepUp, key: signed().key })).toMatch(/enrolled key/);
	});
	test('another ceremony', () => expect(refusal(signed({ type: 'webauthn.create' }))).toMatch(/ceremony/));
	test('another origin', () =>
		expect(refusal(signed({ origin: 'https://bank.example' }))).toMatch(/another origin/));
	test('a frame', () => expect(refusal(signed({ more: { crossOrigin: true } }))).toMatch(/inside a page/));
	test('a page above', () =>
		expect(refusal(signed({ more: { topOrigin: origin } }))).toMatch(/inside a page/));
	test('another host', () => expect(refusal(signed({ rpId: 'bank.example' }))).toMatch(/another host/));
	test('no presence', () => expect(refusal(signed({ flags: flags.uv }))).toMatch(/not present/));
	test('no verification', () => expect(refusal(signed({ flags: flags.up }))).toMatch(/not verified/));
	test('contradicting backup flags', () =>
		expect(refusal(signed({ flags: flags.up | flags.uv | flags.bs }))).toMatch(/contradict/));
	test('bytes behind', () => expect(refusal(signed({ trailing: Buffer.of(0) }))).toMatch(/bytes follow/));
	test('a key twice', () => {
		expect(refusal(signed({ clientData: (said) => said.replace('{', '{"type":"webauthn.get",') }))).toMatch(
			/twice/
		);
	});
	test('a signature with one bit changed', () => {
		const flip = (good: Buffer): Buffer => {
			good[good.length - 1]! ^= 1;
			return good;
		};
		expect(refusal(signed({ signature: flip }))).toMatch(/enrolled key/);
	});
	test('padding', () => expect(refusal(signed(), { signature: 'AA==' })).toMatch(/base64url/));
	test('authenticator data cut', () => expect(refusal(signed(), { authenticatorData: 'AA' })).toMatch(/cut/));
});

describe('a statement is refused', () => {
	const bad = (change: Record<string, unknown>): (() => Statement) => {
		const entries = Object.entries({ ...statement, ...change }).filter(([, value]) => value !== undefined);
		return () => readStatement(canonical(Object.fromEntries(entries)));
	};
	test.each([
		['not canonical', () => readStatement(JSON.stringify(statement, null, 1)), /canonical/],
		['with a member too many', bad({ more: 1 }), /other members/],
		['without a subject', bad({ subject: undefined }), /other members/],
		['of another version', bad({ v: 2 }), /malformed/],
		['with digests unsorted', bad({ digests: statement.digests.toReversed() }), /sorted/],
		['with a digest twice', bad({ digests: [statement.digests[0], statement.digests[0]] }), /sorted/],
		['with a bare digest', bad({ digests: [{ name: 'a', sha256: 'f'.repeat(64) }] }), /digests/],
		['without a head', bad({ log: { root: 'x', size: 0.5 } }), /head/]
	])('%s', (_, read, words) => expect(read).toThrow(words));
});

test('a signature in ECDSA is strict DER', () => {
	const der = (...integers: string[]): Buffer => {
		const parts = integers.map((hex) =>
			Buffer.concat([Buffer.of(2, hex.length / 2), Buffer.from(hex, 'hex')])
		);
		const body = Buffer.concat(parts);
		return Buffer.concat([Buffer.of(0x30, body.length), body]);
	};
	expect(strictDer(der('01', '0080'))).toBe(true);
	expect(strictDer(der('0001', '01'))).toBe(false);
	expect(strictDer(der('80', '01'))).toBe(false);
	expect(strictDer(der('01'))).toBe(false);
	expect(strictDer(der('01', '01', '01'))).toBe(false);
	expect(strictDer(Buffer.concat([der('01', '01'), Buffer.of(0)]))).toBe(false);
});
