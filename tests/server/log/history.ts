import { system } from '$lib/domain/actor';
import type { EventType, Payload } from '$lib/domain/events';
import type { Tx } from '$lib/server/db/handle';
import { record } from '$lib/server/log/record';
import type { TestRegister } from '../../support/register';

const person = (letter: string): `p_${string}` => `p_${letter.repeat(26)}`;
export const owner = person('a');
export const developer = person('b');

/** Records one entry as the register itself, in a running transaction. */
export const enterIn = <T extends EventType>(
	{ ctx }: Pick<TestRegister, 'ctx'>,
	tx: Tx,
	type: T,
	subjects: readonly string[],
	payload: Payload<T>
): number => record(ctx, tx, system('test'), { rule: 'test' }, { type, subjects, payload }).seq;

/** Records one entry a second later, in a transaction of its own. */
export const enter = <T extends EventType>(
	register: Pick<TestRegister, 'ctx' | 'clock'>,
	type: T,
	subjects: readonly string[],
	payload: Payload<T>
): number => {
	register.clock.forward(1000);
	return register.ctx.write((tx) => enterIn(register, tx, type, subjects, payload));
};

export const registered = (
	register: TestRegister,
	model: string,
	uses: readonly string[] = ['IFRS 9']
): number =>
	enter(register, 'model.registered', [model], {
		model,
		name: `Model ${model}`,
		purpose: 'Forecasts deposit volumes',
		portfolio: 'Retail deposits',
		uses: [...uses],
		owner,
		developers: [developer],
		answers: [{ question: 'materiality', score: 2 }]
	});

/** A short history with models, signs, a dataset with its bytes, and two signed checkpoints. */
export const history = (register: TestRegister): void => {
	const { ctx, clock } = register;
	registered(register, 'M-001', ['IFRS 9', 'ICAAP']);
	registered(register, 'M-002');
	enter(register, 'model.edited', ['M-001'], { model: 'M-001', name: 'Deposit volumes' });
	enter(register, 'prior.declared', ['M-001'], {
		model: 'M-001',
		n: 1,
		side: 'owner',
		late: false,
		drivers: [
			{ series: 'income', sign: '+', low: 0.1, high: 1.25, rationale: 'Households save out of income.' }
		]
	});
	ctx.log.signCheckpoint();
	clock.forward(1000);
	ctx.write((tx) => {
		const document = ctx.blobs.put(tx, Buffer.from('{"tiers":[]}'));
		enterIn(register, tx, 'policy.proposed', ['policy'], {
			policy: document,
			release: 'test',
			document,
			changed: []
		});
	});
	enter(register, 'tier.confirmed', ['M-002'], { model: 'M-002', tier: 2, proposed: 2 });
	ctx.log.signCheckpoint();
	enter(register, 'model.edited', ['M-001'], { model: 'M-001', uses: ['ICAAP'] });
};
