import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import { reviseDraft, draftVersion, submitVersion } from '$lib/server/register/version';
import { cancelRun } from '$lib/server/runs/cancel';
import { compareRuns, runEvidence } from '$lib/server/runs/compare';
import { settled } from '$lib/server/runs/execution';
import { createPool, type Pool } from '$lib/server/runs/pool';
import { requestRun, type RunInput } from '$lib/server/runs/request';
import { requestOf, resultOf, runOf } from '$lib/server/runs/run-view';
import { lossOnUnemployment } from '../../domain/specification-example';
import { openSetting, type Setting } from './setting';

let pool: Pool;
let setting: Setting;
beforeAll(async () => {
	pool = createPool(2);
	setting = await openSetting(pool);
	// The first task compiles the thread's source.
}, 60_000);
afterAll(async () => {
	await pool.close();
	setting.bank.close();
});

const run = async (changed: Partial<RunInput> = {}, actor = setting.owner): Promise<string> => {
	const ref = requestRun(setting.bank.ctx, actor, {
		version: setting.version,
		vintage: setting.vintage,
		purpose: 'planned',
		...changed
	});
	await settled(setting.bank.ctx, ref);
	return ref;
};

describe('a run in its thread', () => {
	it('finds the relation the data were made with, and gives the same digest again', async () => {
		const { ctx } = setting.bank;
		const ref = await run();
		const view = runOf(ctx, setting.owner, ref);
		expect(view).toMatchObject({ state: 'finished', reruns: { digest: 'alone' } });
		const result = resultOf(ctx, setting.owner, ref);
		// Made with speed 0.3 and slope 0.5: within three standard errors. The first step is biased in small samples (Banerjee et al. 1986): the slope is held loosely.
		const { speed, longRun } = result.estimates!;
		expect(Math.abs(speed.value - 0.3)).toBeLessThan(3 * speed.se!);
		const slope = longRun.find(({ term }) => term.series === 'unemp')!;
		expect(Math.abs(slope.value - 0.5)).toBeLessThan(0.15);
		expect(view.headline).toMatchObject({ speed: speed.value, gapPeriod: '2019-Q4' });
		expect(view.headline?.gapBefore).toHaveLength(2);
		const judged = result.checks.filter(({ verdict }) => verdict !== null);
		const { holds, query, fails, notAssessable } = view.checks!;
		expect(holds + query + fails + notAssessable).toBe(judged.length);
		expect(view.resultDigest).toBe(result.digest);
		expect(digestOf(Buffer.from(canonical(requestOf(ctx, setting.owner, ref))))).toBe(view.request);

		const again = await run();
		expect(runOf(ctx, setting.owner, again).reruns).toMatchObject({ nth: 2, of: 2, digest: 'equal' });
		// Another person's run of the same specification on the same data has the same figures.
		const theirs = await run({ purpose: 'validation' }, setting.validator);
		const comparison = compareRuns(
			runEvidence(ctx, setting.owner, ref),
			runEvidence(ctx, setting.owner, theirs)
		);
		expect(comparison.causes).toEqual([]);
		expect(comparison.coefficients.every(({ difference }) => difference === 0)).toBe(true);
		expect(comparison.checks.some(({ moved }) => moved)).toBe(false);
	});

	it('compares two runs and names what was not the same', async () => {
		const { bank, owner, model, vintage } = setting;
		const version = draftVersion(bank.ctx, owner, {
			model,
			specification: lossOnUnemployment(),
			reason: 'Later.'
		});
		reviseDraft(bank.ctx, owner, version, {
			specification: lossOnUnemployment({
				sample: { from: '2005-Q1', to: '2019-Q4' },
				shortRun: { own: [1], drivers: [{ series: 'unemp', lags: [0, 1], sign: '+' }], constant: false }
			})
		});
		submitVersion(bank.ctx, owner, version);
		const before = await run();
		const after = await run({
			version,
			vintage,
			settings: [{ setting: 'checks/adjustment.half-life/longest', value: 1, reason: 'To see it move.' }]
		});
		const comparison = compareRuns(runEvidence(bank.ctx, owner, before), runEvidence(bank.ctx, owner, after));
		expect(comparison.digest).toBe('different');
		expect(comparison.causes).toEqual([
			{ cause: 'sample', changes: [{ field: 'sample from', before: '2000-Q1', after: '2005-Q1' }] },
			{
				cause: 'specification',
				changes: [{ field: 'short run, lags of Δunemp', before: '0', after: '0, 1' }]
			},
			{ cause: 'settings', changes: [{ field: 'checks/adjustment.half-life/longest', after: 1 }] }
		]);
		const speed = comparison.coefficients[0]!;
		expect(speed).toMatchObject({ name: 'speed of adjustment', part: 'speed' });
		expect(speed.difference).toBeCloseTo(speed.b!.value - speed.a!.value, 12);
		expect(comparison.coefficients.at(-1)).toMatchObject({
			name: 'Δunemp(t−1)',
			a: null,
			b: { value: expect.any(Number) },
			difference: null
		});
		expect(comparison.checks.find(({ id }) => id.startsWith('adjustment.half-life'))).toMatchObject({
			moved: true,
			a: { verdict: 'holds' },
			b: { verdict: 'query' }
		});
	});

	it('says in a sentence that a column is missing', async () => {
		const { bank, owner, model } = setting;
		const series = lossOnUnemployment().series.map((each) => ({ ...each, column: `${each.column}_rate` }));
		const version = draftVersion(bank.ctx, owner, {
			model,
			specification: lossOnUnemployment({ series }),
			reason: 'Other columns.'
		});
		submitVersion(bank.ctx, owner, version);
		const ref = await run({ version });
		expect(runOf(bank.ctx, owner, ref)).toMatchObject({
			state: 'failed',
			failure: expect.stringContaining('loss_rate')
		});
	});

	it('ends with its thread when it is cancelled', async () => {
		const { bank, owner } = setting;
		const ref = requestRun(bank.ctx, owner, {
			version: setting.version,
			vintage: setting.vintage,
			purpose: 'planned',
			seed: 4
		});
		cancelRun(bank.ctx, owner, ref);
		await settled(bank.ctx, ref);
		expect(runOf(bank.ctx, owner, ref)).toMatchObject({ state: 'cancelled' });
		// The pool goes on.
		expect(runOf(bank.ctx, owner, await run({ seed: 5 })).state).toBe('finished');
	});
});
