import { join } from 'node:path';
import { expect, test } from 'vitest';
import { verifyRegister } from '$lib/server/log/verify';
import { editModel } from '$lib/server/register/model';
import { releaseValidator } from '$lib/server/register/parties';
import { declareSigns } from '$lib/server/register/signs';
import { agreeOverride, confirmTier, proposeOverride } from '$lib/server/register/tier';
import { draftVersion, reviseDraft, submitVersion, withdrawVersion } from '$lib/server/register/version';
import { cancelRun } from '$lib/server/runs/cancel';
import { settled } from '$lib/server/runs/execution';
import { requestRun } from '$lib/server/runs/request';
import type { PersonId } from '$lib/domain/actor';
import { lossOnUnemployment } from '../../domain/specification-example';
import { unemploymentUp } from '../register/bank';
import { manualPool } from './pool';
import { openSetting } from './setting';

test('a replay of all that happens to models and runs gives the same tables', async () => {
	const pool = manualPool();
	const { bank, owner, validator, head, model, version, vintage } = await openSetting(pool);
	const { ctx } = bank;
	confirmTier(ctx, validator, { model, tier: 2 });
	editModel(ctx, owner, model, { uses: ['plan'], materiality: 4, purpose: 'Changed.' });
	proposeOverride(ctx, validator, { model, tier: 3, reason: 'Small book.' });
	agreeOverride(ctx, head, model);
	const next = draftVersion(ctx, owner, { model, specification: lossOnUnemployment(), reason: 'HAC.' });
	reviseDraft(ctx, owner, next, { specification: lossOnUnemployment({ standardErrors: 'hac' }) });
	submitVersion(ctx, owner, next);
	const last = draftVersion(ctx, owner, { model, specification: lossOnUnemployment(), reason: 'Again.' });
	withdrawVersion(ctx, owner, last, 'Not needed.');
	const run = (seed: number): string =>
		requestRun(ctx, owner, { version, vintage, purpose: 'planned', seed });
	const refs = [run(1), run(2), run(3), run(4)];
	pool.held[0]!.finish({ answer: 42 });
	pool.held[1]!.fail(new Error('out of memory'));
	cancelRun(ctx, owner, refs[2]!);
	await Promise.all(refs.slice(0, 3).map((ref) => settled(ctx, ref)));
	declareSigns(ctx, owner, { model, drivers: [{ ...unemploymentUp, low: 0 }] });
	releaseValidator(ctx, head, { model, person: validator.person as PersonId });
	ctx.log.signCheckpoint();
	const report = await verifyRegister({
		file: join(bank.folder, 'keelbook.db'),
		projectors: ctx.projectors
	});
	expect({ faults: report.faults, differences: report.differences }).toEqual({ faults: [], differences: [] });
	// Four runs, three versions, one model and what stands around them.
	expect(report.rows).toBeGreaterThan(20);
	bank.close();
});
