import { describe, expect, test } from 'vitest';
import { Invalid } from '$lib/domain/faults';
import { checkPassword, hashPassword, passwordMatches } from '$lib/server/auth/passwords';

const about = ['Marta Quill', 'marta.quill', 'Seahaven Bank'];
const said = (password: string): string => {
	try {
		checkPassword(password, about);
	} catch (fault) {
		if (fault instanceof Invalid) return fault.message;
		throw fault;
	}
	return 'taken';
};

describe('taken', () => {
	test.each([
		'seven gulls over the harbour wall',
		'correct horse battery staple',
		'vK9-tq2_Zr7!mW4x',
		'Fünf Möwen über der Mole',
		'ブラウザの窓から見える海の色は青い',
		'x7f2 9kqp 3mzv 8wlt'
	])('%s', (password) => {
		expect(said(password)).toBe('taken');
	});
});

describe('refused as common', () => {
	test.each([
		'passwordpassword',
		'Password1234567',
		'P@ssw0rdP@ssw0rd',
		'qwertyuiopasdfgh',
		'1234567890123456',
		'aaaaaaaaaaaaaaaaaaaa',
		'abcabcabcabcabcabc',
		'iloveyou-iloveyou',
		'administrator2024',
		'letmeinletmein99',
		'Summer2023Summer2023',
		'0987654321098765',
		'welcome123456789',
		'zxcvbnmasdfghjkl',
		'liverpool 1234567'
	])('%s', (password) => {
		expect(said(password)).toMatch(/first that anyone would try/);
	});
});

test('refused for its length, counted after NFKC in characters', () => {
	expect(said('fourteen chars')).toMatch(/at least 15/);
	expect(said('x7f2 9kqp 3mzv 8wlt'.repeat(7))).toMatch(/at most 128/);
	// Each ligature becomes two letters.
	expect(said('\ufb01x7f2\ufb029kqp3mzv')).toBe('taken');
});

test.each(['my name is quill of course', 'seahaven is where I work now'])(
	'refused for holding a name: %s',
	(password) => {
		expect(said(password)).toMatch(/holds your name/);
	}
);

test('argon2id with 64 MiB, three passes', async () => {
	const stored = await hashPassword('seven gulls over the harbour wall');
	expect(stored).toMatch(/^\$argon2id\$v=19\$m=65536,t=3,p=1\$/);
	expect(await passwordMatches(stored, 'seven gulls over the harbour wall')).toBe(true);
	expect(await passwordMatches(stored, 'seven gulls over the harbour wal')).toBe(false);
	expect(await passwordMatches(undefined, 'no account has this password')).toBe(false);
});

test('one text for what two keyboards write', async () => {
	const stored = await hashPassword('f\u00fcnf m\u00f6wen \u00fcber der mole');
	expect(await passwordMatches(stored, 'fu\u0308nf mo\u0308wen u\u0308ber der mole')).toBe(true);
});

test('beyond four at work and sixteen in wait nobody queues', async () => {
	const tries = Array.from({ length: 24 }, () =>
		passwordMatches(undefined, 'x').then(String, (fault: Error) => fault.message)
	);
	const answers = await Promise.all(tries);
	expect(answers.filter((answer) => answer.startsWith('Too many'))).toHaveLength(4);
	expect(answers.filter((answer) => answer === 'false')).toHaveLength(20);
});
