import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { takeStepUp } from '$lib/server/auth/step-up';
import {
	confirmPolicy,
	prepareConfirmation,
	prepareProposal,
	proposePolicy,
	type AdoptionInput
} from '$lib/server/policy/adoption';
import { adoptReleased, adoptedPolicy, policyOf } from '$lib/server/policy/policy';
import { policyPage } from '$lib/server/policy/policy-view';
import { latestRelease, releasedPolicies } from '$lib/server/policy/released';
import type { Actor } from '$lib/domain/actor';
import { Conflict, Invalid, Refused } from '$lib/domain/faults';
import { policyLine, policyLines } from '$lib/domain/policy';
import type { Ctx } from '$lib/server/context';
import { person } from '../../support/people';
import { testRegister, type TestRegister } from '../../support/register';

const release = latestRelease();

/** The release with the bank's reasons, and one value of its own. */
const input = (value: number): AdoptionInput => ({
	release: release.digest,
	lines: policyLines(release.policy).map(({ path }) => ({
		line: path,
		reason: `Our reason for ${path}.`,
		...(path === 'levels/query' && { value })
	}))
});

describe('adopting a policy', () => {
	let register: TestRegister;
	let ctx: Ctx;
	let head: Actor;
	let admin: Actor;

	beforeEach(async () => {
		register = await testRegister({ demo: true });
		ctx = { ...register.ctx, policies: releasedPolicies() };
		ctx.write((tx) => adoptReleased(ctx, tx));
		head = person(register, { roles: ['head'] });
		admin = person(register, { roles: ['admin'] });
	});
	afterEach(() => register.close());

	const propose = async (actor: Actor, of: AdoptionInput): Promise<number> => {
		const { challenge } = await prepareProposal(ctx, actor, of);
		return proposePolicy(ctx, actor, of, await takeStepUp(ctx, actor, { challenge, response: '' }));
	};
	const confirm = async (actor: Actor, proposal: number): Promise<void> => {
		const { challenge } = await prepareConfirmation(ctx, actor, proposal);
		confirmPolicy(ctx, actor, proposal, await takeStepUp(ctx, actor, { challenge, response: '' }));
	};

	test('the released policy is in force from the start, adopted by the register', () => {
		const { digest, changed, by, policy } = adoptedPolicy(ctx, ctx.read);
		expect(digest).toBe(release.digest);
		expect(changed).toBe(false);
		expect(by).toBe('system');
		expect(policy.lookBack.value).toBe(24);
	});

	test('head and admin adopt it with own reasons; older results keep theirs', async () => {
		const proposal = await propose(head, input(0.1));
		expect(adoptedPolicy(ctx, ctx.read).digest).toBe(release.digest);
		await confirm(admin, proposal);
		const { policy, digest, changed } = adoptedPolicy(ctx, ctx.read);
		expect(changed).toBe(true);
		expect(policyLine(policy, 'levels/query')).toMatchObject({
			value: 0.1,
			reason: 'Our reason for levels/query.'
		});
		expect(policyLine(policy, 'levels/fails')?.value).toBe(0.01);
		expect(policyLine(policyOf(ctx, ctx.read, release.digest), 'levels/query')?.value).toBe(0.05);
		expect(policyLine(policyOf(ctx, ctx.read, digest), 'levels/query')?.value).toBe(0.1);
		const page = policyPage(ctx, head);
		expect(page.adoptions).toHaveLength(2);
		expect(page.lines.find(({ path }) => path === 'levels/query')?.released).toBe(0.05);
		expect(page.proposal).toBeUndefined();
	});

	test('a line without a reason is named', async () => {
		const without = input(0.1);
		const lines = without.lines.filter(({ line }) => line !== 'checks/design.degrees/holds-from');
		const prepared = prepareProposal(ctx, head, { ...without, lines });
		await expect(prepared).rejects.toThrow(Invalid);
		await expect(prepared).rejects.toThrow('checks/design.degrees/holds-from');
	});

	test('a value of another kind is refused', async () => {
		const wrong = input(0.1);
		const lines = wrong.lines.map((line) =>
			line.line === 'lookBack' ? { ...line, value: 'two years' } : line
		);
		await expect(prepareProposal(ctx, head, { ...wrong, lines })).rejects.toThrow('lookBack needs a number');
	});

	test('only the head proposes, and the proposer cannot sign a second time', async () => {
		await expect(prepareProposal(ctx, admin, input(0.1))).rejects.toThrow(Refused);
		await expect(prepareProposal(ctx, person(register, { roles: ['owner'] }), input(0.1))).rejects.toThrow(
			Refused
		);
		const proposal = await propose(head, input(0.1));
		await expect(confirm(head, proposal)).rejects.toThrow(Refused);
		expect(adoptedPolicy(ctx, ctx.read).digest).toBe(release.digest);
	});

	test('a later proposal replaces the one that waits', async () => {
		const first = await propose(head, input(0.1));
		const second = await propose(head, input(0.2));
		await expect(confirm(admin, first)).rejects.toThrow(Conflict);
		await confirm(admin, second);
		expect(policyLine(adoptedPolicy(ctx, ctx.read).policy, 'levels/query')?.value).toBe(0.2);
	});

	test('what is signed is what was read: another value in between does not pass', async () => {
		const { challenge } = await prepareProposal(ctx, head, input(0.1));
		const signed = await takeStepUp(ctx, head, { challenge, response: '' });
		expect(() => proposePolicy(ctx, head, input(0.2), signed)).toThrow(Conflict);
	});
});
