import { expect, test } from 'vitest';
import { Refused } from '$lib/domain/faults';
import { firstLinks } from '$lib/server/people/first-start';
import { recordRefusal } from '$lib/server/people/refusals';
import { recover } from '$lib/server/people/recovery';
import { signOut } from '$lib/server/people/sign-in';
import { takeStepUp } from '$lib/server/auth/step-up';
import { perform, prepare, type Beside } from '$lib/server/people/perform';
import type { Act } from '$lib/server/people/acts';
import type { Actor } from '$lib/domain/actor';
import { person } from '../../support/people';
import { bank, enrolBy, entries, origin, password, signIn, twoAdmins, visitor } from './bank';

const forms = (secret: string): string[] => [
	secret,
	secret.toLowerCase(),
	Buffer.from(secret).toString('base64'),
	Buffer.from(secret).toString('base64url'),
	Buffer.from(secret).toString('hex'),
	encodeURIComponent(secret)
];

test('trap-20: neither name nor address, number, password, code, link, token or challenge stands in the log', async () => {
	const register = await bank();
	const { ctx } = register;
	const secrets = ['Marta Quill', 'Quill', 'marta.quill@bank.example', 'Noor Vance', password];
	const [marta, noor] = await twoAdmins(register);
	secrets.push(...marta.codes, ...marta.codes.map((code) => code.replaceAll('-', '')), ...noor.codes);
	const act = async (actor: Actor, what: Act, beside: Beside = {}) => {
		const { challenge, options } = await prepare(ctx, actor, what, beside);
		const response = options ? marta.device.get({ challenge: options.challenge, origin }) : '';
		return perform(ctx, actor, what, await takeStepUp(ctx, actor, { challenge, response }), beside);
	};
	const identity = { name: 'Ottokar Zimbel', mail: 'o.zimbel@bank.example', staffNumber: 'ZB-77123' };
	const invited = await act(marta.actor, { kind: 'invite' }, { identity });
	if (invited.kind !== 'link') throw new Error('No link');
	secrets.push('Ottokar', 'Zimbel', identity.mail, identity.staffNumber, invited.url.split('#')[1]!);
	const zimbel = await enrolBy(register, invited.url, identity);
	secrets.push((await signIn(register, zimbel.device))!, (await signIn(register, zimbel.device))!);
	const token = await (async () => {
		const what: Act = { kind: 'create-token', person: zimbel.person, scopes: ['read'], days: 3 };
		const beside = { label: 'label of Zimbel' };
		const { options } = await prepare(ctx, zimbel.actor, what, beside);
		const response = zimbel.device.get({ challenge: options!.challenge, origin });
		return perform(
			ctx,
			zimbel.actor,
			what,
			await takeStepUp(ctx, zimbel.actor, { challenge: '', response }),
			beside
		);
	})();
	if (token.kind !== 'token') throw new Error('No token');
	secrets.push(token.token, token.token.split('_')[2]!, 'label of Zimbel');
	await recover(ctx, visitor(), {
		mail: 'typed.wrongly@bank.example',
		password: 'typed in the wrong field',
		code: 'x'
	});
	secrets.push('typed.wrongly', 'typed in the wrong field');
	secrets.push((await recover(ctx, visitor(), { mail: identity.mail, password, code: zimbel.codes[0]! }))!);
	recordRefusal(ctx, zimbel.actor, new Refused('S11', 'log.read', 'words'));
	const seat = person(register, { name: 'Seraphin Holt', roles: ['owner'] });
	secrets.push('Seraphin', 'Holt');
	signOut(ctx, seat);

	// What was done did reach the log: a canary in an empty cage sings of nothing.
	expect(new Set(entries(register).map(({ type }) => type)).size).toBe(13);
	const bodies = ctx.read
		.all<{ body: string }>(ctx.read.q.selectFrom('entry').select('body'))
		.map(({ body }) => body)
		.join('\n');
	for (const secret of secrets)
		for (const form of forms(secret)) expect(bodies.includes(form), `${secret} as ${form}`).toBe(false);
	register.close();
});

test('no secret is stored but as a digest, in any table', async () => {
	const register = await bank();
	const { ctx } = register;
	const [first] = firstLinks(ctx);
	const identity = { name: 'Marta Quill', mail: 'm@bank.example', staffNumber: '1' };
	const marta = await enrolBy(register, first.url, identity);
	const token = (await signIn(register, marta.device))!;
	const secrets = [
		first.url.split('#')[1]!,
		password,
		token,
		...marta.codes.map((code) => code.replaceAll('-', ''))
	];
	const tables = [
		'session',
		'challenge',
		'password',
		'recovery_code',
		'enrolment_link',
		'token_secret',
		'person'
	] as const;
	const rows = JSON.stringify(tables.map((table) => ctx.read.all(ctx.read.q.selectFrom(table).selectAll())));
	for (const secret of secrets) expect(rows.includes(secret)).toBe(false);
	register.close();
});

test('a refusal is entered once for each person, rule and minute', async () => {
	const register = await bank();
	const [ann, ben] = [person(register), person(register)];
	const refuse = (actor: Actor, rule: string) =>
		recordRefusal(register.ctx, actor, new Refused(rule, 'log.read', 'words', true, 'M-001'));
	refuse(ann, 'S11');
	refuse(ann, 'S11');
	refuse(ann, 'S1');
	refuse(ben, 'S11');
	register.clock.forward(60_000);
	refuse(ann, 'S11');
	const refused = entries(register).filter(({ type }) => type === 'access.refused');
	expect(refused.map(({ actor, payload }) => [actor, (payload as { rule: string }).rule])).toEqual([
		[ann.person, 'S11'],
		[ann.person, 'S1'],
		[ben.person, 'S11'],
		[ann.person, 'S11']
	]);
	expect(refused[0]).toMatchObject({ payload: { action: 'log.read', subject: 'M-001' } });
	register.close();
});
