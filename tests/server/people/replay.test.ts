import { join } from 'node:path';
import { expect, test } from 'vitest';
import { verifyStepUp } from '$lib/chain/step-up';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { Actor } from '$lib/domain/actor';
import { takeStepUp } from '$lib/server/auth/step-up';
import { projectors } from '$lib/server/projectors';
import { verifyRegister } from '$lib/server/log/verify';
import type { Act } from '$lib/server/people/acts';
import { perform, prepare, withdraw } from '$lib/server/people/perform';
import { idOf, person } from '../../support/people';
import { bank, entries, signIn, twoAdmins } from './bank';

test('a replay of all that happens to people gives the same tables, and every signature verifies offline', async () => {
	const register = await bank();
	const { ctx } = register;
	const [marta] = await twoAdmins(register);
	for (const counter of [5, 5]) await signIn(register, marta.device, { counter });
	const [first, second] = [person(register, { roles: ['admin'] }), person(register, { roles: ['admin'] })];
	const act = async (actor: Actor, what: Act): Promise<number> => {
		const { challenge } = await prepare(ctx, actor, what, { label: 'x' });
		perform(ctx, actor, what, await takeStepUp(ctx, actor, { challenge, response: '' }), { label: 'x' });
		return entries(register).at(-1)!.seq;
	};
	const ann = person(register, { roles: ['owner'] });
	const who = idOf(ann);
	await act(ann, { kind: 'create-token', person: who, scopes: ['read'], days: 9 });
	await act(ann, { kind: 'create-token', person: who, scopes: ['read', 'data'], days: 9 });
	await act(second, {
		kind: 'approve',
		proposal: await act(first, { kind: 'grant', person: who, role: 'validator' })
	});
	withdraw(ctx, first, await act(first, { kind: 'recover', person: who }));
	register.clock.forward(60_000);
	await act(first, { kind: 'end-role', person: who, role: 'owner' });
	await act(first, { kind: 'disable', person: who });
	await act(second, { kind: 'approve', proposal: await act(first, { kind: 're-enable', person: who }) });
	await act(first, { kind: 'grant', person: who, role: 'owner' });
	await act(second, { kind: 'approve', proposal: await act(first, { kind: 'recover', person: who }) });

	const keys = new Map<string, string>();
	let signed = 0;
	for (const { type, actor, payload, auth } of entries(register)) {
		if (type === 'credential.enrolled') {
			const { credential, publicKey } = payload as { credential: string; publicKey: string };
			keys.set(credential, publicKey);
		}
		if (!auth.stepUp) continue;
		const statement = verifyStepUp(auth.stepUp, keys.get(auth.stepUp.credential)!, ctx.config.origin);
		expect(statement).toMatchObject({ by: actor, action: auth.rule });
		expect(statement.digests).toContainEqual({
			name: 'payload',
			sha256: digestOf(Buffer.from(canonical(payload)))
		});
		signed += 1;
	}
	expect(signed).toBe(12);
	ctx.log.signCheckpoint();
	const report = await verifyRegister({ file: join(register.folder, 'keelbook.db'), projectors });
	expect(report.faults).toEqual([]);
	expect(report.differences).toEqual([]);
	expect(report.rows).toBeGreaterThan(10);
	register.close();
});
