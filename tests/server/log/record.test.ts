import { system } from '$lib/domain/actor';
import { record } from '$lib/server/log/record';
import { expect, test } from 'vitest';
import { testRegister } from '../../support/register';

const started = { version: '0.1.0', engine: '1.0.0', node: 'v20', sqlite: '3.53.2', schema: 6 };

test('an entry is appended, counted per subject and signed', async () => {
	const { ctx, clock, close, opened } = await testRegister();
	clock.forward(5);
	const entry = ctx.write((tx) =>
		record(
			ctx,
			tx,
			system('r1'),
			{ rule: 'app.start' },
			{ type: 'app.started', subjects: ['register'], payload: started }
		)
	);
	expect(entry).toMatchObject({
		seq: 1,
		at: '2026-03-02T09:00:00.005Z',
		subjects: [{ n: 2, prev: 0, ref: 'register' }]
	});
	expect(ctx.log.frontier().size).toBe(2);
	expect(ctx.log.signCheckpoint()?.size).toBe(2);
	expect(opened.fresh).toBe(true);
	close();
});
