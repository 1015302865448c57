import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Absent, Conflict, Invalid, Refused } from '$lib/domain/faults';
import { registerModel } from '$lib/server/register/model';
import { draftVersion, withdrawVersion } from '$lib/server/register/version';
import { cancelRun } from '$lib/server/runs/cancel';
import { settled, startRuns } from '$lib/server/runs/execution';
import { registerTable } from '$lib/server/runs/register-table';
import { requestRun, type RunInput } from '$lib/server/runs/request';
import { listRuns, latestRun, runCounts, runsOnVintage } from '$lib/server/runs/run-list';
import { requestOf, resultOf, runOf } from '$lib/server/runs/run-view';
import { lossOnUnemployment } from '../../domain/specification-example';
import { modelInput } from '../register/bank';
import { manualPool, type ManualPool } from './pool';
import { lossFile, openSetting, storeVintage, type Setting } from './setting';

let setting: Setting;
let pool: ManualPool;
beforeEach(async () => {
	pool = manualPool();
	setting = await openSetting(pool);
});
afterEach(() => setting.bank.close());

const request = (changed: Partial<RunInput> = {}, actor = setting.owner): string =>
	requestRun(setting.bank.ctx, actor, {
		version: setting.version,
		vintage: setting.vintage,
		purpose: 'planned',
		...changed
	});
/** Ends the n-th computation asked of the pool and waits until it is entered. */
const finish = async (ref: string, n: number, result: unknown = { answer: 42 }): Promise<void> => {
	pool.held[n]!.finish(result);
	await settled(setting.bank.ctx, ref);
};

describe('a run', () => {
	it('waits, shows how far it is, ends with its result in a blob and its digest in the entry', async () => {
		const { ctx } = setting.bank;
		const ref = request();
		expect(ref).toBe('R-0001');
		expect(runOf(ctx, setting.owner, ref)).toMatchObject({ state: 'queued', mayCancel: true });
		expect(() => resultOf(ctx, setting.owner, ref)).toThrow(Conflict);
		pool.held[0]!.progress({ done: 3, of: 28, label: 'integration.adf' });
		expect(runOf(ctx, setting.owner, ref)).toMatchObject({
			state: 'running',
			progress: { done: 3, of: 28, label: 'integration.adf' }
		});
		await finish(ref, 0);
		const view = runOf(ctx, setting.owner, ref);
		expect(view).toMatchObject({
			state: 'finished',
			purpose: 'planned',
			tier: 2,
			checks: { holds: 20, query: 2, fails: 1, notAssessable: 3 },
			headline: { gap: 1.6, gapBefore: [0.2, 0.9] },
			reruns: { nth: 1, of: 1, digest: 'alone' },
			mayCancel: false
		});
		expect(resultOf(ctx, setting.owner, ref)).toEqual({ answer: 42 });
	});

	it('is asked for with everything its result depends on', () => {
		const ref = request({
			settings: [{ setting: 'checks/adjustment.half-life/longest', value: 20, reason: 'Annual budget.' }],
			seed: 7
		});
		const asked = requestOf(setting.bank.ctx, setting.owner, ref);
		expect(asked).toEqual(pool.held[0]!.task.request);
		expect(asked).toMatchObject({
			seed: 7,
			tier: 2,
			purpose: 'planned',
			specification: { dependent: 'loss' }
		});
		const { data } = pool.held[0]!.task;
		expect(data.columns.map(({ name, values }) => [name, values.length])).toEqual([
			['loss', 80],
			['unemp', 80]
		]);
		const view = runOf(setting.bank.ctx, setting.owner, ref);
		expect(view.table).toBe(asked.vintage);
		expect(view.file).not.toBe(view.table);
	});

	it('fails with a sentence when the thread ends, or when the input is to blame', async () => {
		const { ctx } = setting.bank;
		const [first, second] = [request(), request({ seed: 2 })];
		pool.held[0]!.fail(new Error('Worker terminated due to reaching memory limit'));
		await settled(ctx, first);
		expect(runOf(ctx, setting.owner, first)).toMatchObject({
			state: 'failed',
			failure: 'The computation ended with an error: Worker terminated due to reaching memory limit'
		});
		expect(() => resultOf(ctx, setting.owner, first)).toThrow('it failed');
		pool.held[1]!.answer({ state: 'refused', sentence: 'The data have no column unemp.' });
		await settled(ctx, second);
		expect(runOf(ctx, setting.owner, second).failure).toBe('The data have no column unemp.');
	});

	it('is cancelled by its starter, a validator or the head, and its late result is dropped', async () => {
		const { ctx } = setting.bank;
		const ref = request();
		const stranger = setting.bank.person('S. Oduya', 'owner');
		expect(() => cancelRun(ctx, stranger, ref)).toThrow(Refused);
		cancelRun(ctx, setting.validator, ref);
		await settled(ctx, ref);
		pool.held[0]!.finish({ late: true });
		expect(runOf(ctx, setting.owner, ref)).toMatchObject({ state: 'cancelled', mayCancel: false });
		expect(() => cancelRun(ctx, setting.owner, ref)).toThrow(Conflict);
		expect(() => cancelRun(ctx, setting.owner, 'R-9999')).toThrow(Absent);
	});
});

describe('the same request', () => {
	it('has the same digest; reruns are counted and compared', async () => {
		const { ctx } = setting.bank;
		const refs = [request(), request(), request()];
		const views = () => refs.map((ref) => runOf(ctx, setting.owner, ref));
		expect(new Set(views().map((view) => view.request)).size).toBe(1);
		await finish(refs[0]!, 0);
		await finish(refs[1]!, 1);
		await finish(refs[2]!, 2, { answer: 43 });
		expect(views().map(({ reruns }) => [reruns.nth, reruns.of, reruns.digest])).toEqual([
			[1, 3, 'equal'],
			[2, 3, 'equal'],
			[3, 3, 'different']
		]);
		const other = request({ seed: 99 });
		expect(runOf(ctx, setting.owner, other).reruns).toMatchObject({ nth: 1, of: 1 });
	});
});

describe('what a run is for', () => {
	it('decides who may start it', () => {
		const { owner, validator, head } = setting;
		expect(() => request({ purpose: 'validation' })).toThrow(Refused);
		expect(() => request({ purpose: 'planned' }, validator)).toThrow(Refused);
		expect(() => request({ purpose: 'validation' }, head)).toThrow(Refused);
		for (const [purpose, actor] of [
			['validation', validator],
			['exploratory', validator],
			['exploratory', head],
			['exploratory', owner]
		] as const)
			expect(request({ purpose }, actor)).toMatch(/^R-000\d$/);
		request();
		expect(runCounts(setting.bank.ctx, owner, setting.model)).toEqual({
			planned: 1,
			validation: 1,
			exploratory: 3
		});
		expect(listRuns(setting.bank.ctx, owner, { purpose: 'exploratory' }).runs).toHaveLength(3);
	});

	it('leaves drafts to exploring, and nothing runs on what was withdrawn', () => {
		const { bank, owner, model } = setting;
		const version = draftVersion(bank.ctx, owner, {
			model,
			specification: lossOnUnemployment(),
			reason: 'HAC.'
		});
		expect(() => request({ version })).toThrow('M-001/2 is a draft');
		request({ version, purpose: 'exploratory' });
		withdrawVersion(bank.ctx, owner, version, 'Not needed.');
		expect(() => request({ version, purpose: 'exploratory' })).toThrow('was withdrawn');
	});
});

describe('a request that cannot be taken', () => {
	it('names the rule or the field', async () => {
		const { bank, owner } = setting;
		const other = registerModel(bank.ctx, owner, modelInput({ name: 'Another' }));
		const version = draftVersion(bank.ctx, owner, { model: other, specification: lossOnUnemployment() });
		expect(() => request({ version, purpose: 'exploratory' })).toThrow(
			expect.objectContaining({ rule: 'signs-first' })
		);
		const vintage = await storeVintage(bank, owner, other, lossFile(12));
		expect(() => request({ vintage })).toThrow(
			expect.objectContaining({ issues: [expect.objectContaining({ pointer: '/vintage' })] })
		);
		const override =
			(setting: string, value: number | string, reason = 'Because.') =>
			() =>
				request({ settings: [{ setting, value, reason }] });
		expect(override('checks/adjustment.half-life/longest', 'long')).toThrow(Invalid);
		expect(override('checks/adjustment.half-life/least', 5)).toThrow('does not let a run change');
		expect(override('checks/nothing/here', 5)).toThrow('no line');
		expect(override('checks/adjustment.half-life/longest', 20, ' ')).toThrow(Invalid);
		expect(() => request({ seed: -1 })).toThrow(Invalid);
		expect(() => request({ version: 'M-001/7' })).toThrow(Absent);
		expect(listRuns(bank.ctx, owner).runs).toEqual([]);
	});
});

describe('after a restart', () => {
	it('unfinished runs are computed, and one that never ends is given up', async () => {
		const { bank, owner } = setting;
		const [done, ref] = [request(), request({ seed: 2 })];
		await finish(done, 0);
		await pool.close();
		await settled(bank.ctx, ref);
		// Closing did not end the run: it waits for the next start.
		expect(runOf(bank.ctx, owner, ref).state).toBe('queued');
		const next = manualPool();
		const ctx = { ...bank.ctx, pool: next };
		startRuns(ctx);
		expect(next.held.map(({ task }) => task.request.seed)).toEqual([2]);
		next.held[0]!.finish({ answer: 1 });
		await settled(ctx, ref);
		expect(runOf(ctx, owner, ref).state).toBe('finished');

		const fatal = requestRun(ctx, owner, {
			version: setting.version,
			vintage: setting.vintage,
			purpose: 'planned',
			seed: 3
		});
		for (let start = 0; start < 2; start += 1) startRuns({ ...ctx, pool: manualPool() });
		expect(runOf(ctx, owner, fatal).state).toBe('queued');
		const last = { ...ctx, pool: manualPool() };
		startRuns(last);
		expect(runOf(last, owner, fatal)).toMatchObject({
			state: 'failed',
			failure: 'The computation did not end in 3 starts of the server and was given up.'
		});
	});
});

describe('lists of runs', () => {
	it('page by reference, newest first, and hide what the reader may not see', async () => {
		const { bank, owner, model, vintage } = setting;
		const refs = Array.from({ length: 5 }, (_, seed) => {
			bank.clock.forward(1000);
			return request({ seed });
		});
		const first = listRuns(bank.ctx, owner, { limit: 2 });
		expect(first.runs.map(({ ref }) => ref)).toEqual(['R-0005', 'R-0004']);
		const second = listRuns(bank.ctx, owner, { limit: 2, before: first.next! });
		expect(second.runs.map(({ ref }) => ref)).toEqual(['R-0003', 'R-0002']);
		const third = listRuns(bank.ctx, owner, { limit: 2, before: second.next! });
		expect(third.runs.map(({ ref }) => ref)).toEqual(['R-0001']);
		expect(third.next).toBeUndefined();
		expect(() => listRuns(bank.ctx, owner, { before: 'R-0099' })).toThrow(Absent);
		const stranger = bank.person('S. Oduya', 'owner');
		expect(listRuns(bank.ctx, stranger).runs).toEqual([]);
		expect(() => listRuns(bank.ctx, stranger, { model })).toThrow(
			expect.objectContaining({ visible: false })
		);
		expect(() => runOf(bank.ctx, stranger, refs[0]!)).toThrow(expect.objectContaining({ visible: false }));
		expect(runsOnVintage(bank.ctx, owner, vintage)).toHaveLength(5);
		expect(listRuns(bank.ctx, setting.head).runs).toHaveLength(5);
	});

	it('give the register its headline: the newest finished planned run', async () => {
		const { bank, owner, model } = setting;
		expect(registerTable(bank.ctx, owner)[0]?.latest).toBeUndefined();
		const refs = [request(), request({ purpose: 'exploratory' }), request({ seed: 2 })];
		bank.clock.forward(1000);
		await finish(refs[0]!, 0);
		expect(latestRun(bank.ctx, owner, model)?.ref).toBe(refs[0]);
		bank.clock.forward(1000);
		await finish(refs[2]!, 2);
		bank.clock.forward(1000);
		await finish(refs[1]!, 1);
		expect(latestRun(bank.ctx, owner, model)?.ref).toBe(refs[2]);
		expect(registerTable(bank.ctx, owner)).toMatchObject([
			{
				ref: model,
				state: 'submitted',
				latest: { run: refs[2], fails: 1, query: 2, notAssessable: 3, gap: 1.6 }
			}
		]);
	});
});
