import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Absent, Conflict, Invalid, Refused } from '$lib/domain/faults';
import type { Specification } from '$lib/domain/specification';
import { listModels } from '$lib/server/register/model-list';
import { registerModel } from '$lib/server/register/model';
import { assignValidator } from '$lib/server/register/parties';
import { declareSigns } from '$lib/server/register/signs';
import { signsOf } from '$lib/server/register/signs-view';
import { draftVersion, reviseDraft, submitVersion, withdrawVersion } from '$lib/server/register/version';
import { compareVersions, versionOf } from '$lib/server/register/version-view';
import { lossOnUnemployment } from '../../domain/specification-example';
import { modelInput, openBank, unemploymentUp, type Bank } from './bank';

let bank: Bank;
let owner: Actor;
let model: string;
beforeEach(async () => {
	bank = await openBank();
	owner = bank.person('T. Halvar', 'owner');
	model = registerModel(bank.ctx, owner, modelInput());
});
afterEach(() => bank.close());

const claimed: Specification['claimed'] = {
	source: 'Development paper, table 4',
	coefficients: [{ term: 'ec.l1', value: '-0.3270', se: '0.077' }]
};
const declare = () => declareSigns(bank.ctx, owner, { model, drivers: [unemploymentUp] });
const draft = (changed: Partial<Specification> = {}, reason = 'Next.') =>
	draftVersion(bank.ctx, owner, { model, specification: lossOnUnemployment(changed), reason });

const signsFirst = expect.objectContaining({ name: 'Refused', rule: 'signs-first' });

describe('signs come first', () => {
	it('refuses claims and submissions until the drivers are declared', () => {
		expect(() => draft({ claimed })).toThrow(signsFirst);
		const plain = draft();
		expect(() => submitVersion(bank.ctx, owner, plain)).toThrow(signsFirst);
		expect(() =>
			reviseDraft(bank.ctx, owner, plain, { specification: lossOnUnemployment({ claimed }) })
		).toThrow(signsFirst);
		expect(versionOf(bank.ctx, owner, plain).state).toBe('draft');
		declare();
		const ref = draft({ claimed });
		submitVersion(bank.ctx, owner, ref);
		expect(versionOf(bank.ctx, owner, ref)).toMatchObject({
			ref: 'M-001/2',
			state: 'submitted',
			// The digits stand as they were typed.
			specification: { claimed: { coefficients: [{ term: 'ec.l1', value: '-0.3270', se: '0.077' }] } }
		});
	});

	it('keeps both declarations and flags the later one once estimates were seen', () => {
		declare();
		bank.clock.forward(1000);
		declareSigns(bank.ctx, owner, { model, drivers: [{ ...unemploymentUp, low: 0.2 }] });
		expect(
			signsOf(bank.ctx, owner, model).declarations.map(({ n, late, replaced }) => [n, late, replaced])
		).toEqual([
			[1, false, true],
			[2, false, false]
		]);
		draft({
			claimed,
			longRun: {
				...lossOnUnemployment().longRun,
				drivers: [{ series: 'unemp', sign: '+', plausible: [0.2, 1], rationale: 'As declared.' }]
			}
		});
		declareSigns(bank.ctx, owner, { model, drivers: [{ ...unemploymentUp, sign: 'any', low: -1 }] });
		const view = signsOf(bank.ctx, owner, model);
		expect(view.estimatesSeen).toBe(true);
		expect(view.declarations.map(({ n, late }) => [n, late])).toEqual([
			[1, false],
			[2, false],
			[3, true]
		]);
		expect(view.inForce).toMatchObject([{ n: 3, sign: 'any', low: -1, by: 'T. Halvar' }]);
	});

	it('lets a validator declare their own beside the owner’s', () => {
		const head = bank.person('G. Ostrom', 'head');
		const validator = bank.person('I. Marrow', 'validator');
		declare();
		const theirs = { model, side: 'validator' as const, drivers: [{ ...unemploymentUp, low: 0.3 }] };
		expect(() => declareSigns(bank.ctx, validator, theirs)).toThrow(Refused);
		assignValidator(bank.ctx, head, { model, person: validator.person as PersonId });
		expect(() => declareSigns(bank.ctx, owner, theirs)).toThrow(Refused);
		declareSigns(bank.ctx, validator, theirs);
		expect(signsOf(bank.ctx, owner, model).inForce.map(({ side, low }) => [side, low])).toEqual([
			['owner', 0.1],
			['validator', 0.3]
		]);
	});

	it.each([
		['a range that ends before it begins', { low: 2, high: 1 }, '/0/high'],
		['a positive sign with a range below zero', { low: -2, high: -1 }, '/0/high'],
		['no rationale', { rationale: ' ' }, '/0/rationale'],
		['a name that is none', { series: '2nd try' }, '/0/series']
	])('refuses %s', (_, changed, pointer) => {
		expect(() =>
			declareSigns(bank.ctx, owner, { model, drivers: [{ ...unemploymentUp, ...changed }] })
		).toThrow(
			expect.objectContaining({ issues: [expect.objectContaining({ pointer: `/drivers${pointer}` })] })
		);
	});

	it('refuses to submit what says otherwise than the declaration', () => {
		declareSigns(bank.ctx, owner, { model, drivers: [{ ...unemploymentUp, sign: '-', low: -1, high: 0 }] });
		const ref = draft();
		expect(() => submitVersion(bank.ctx, owner, ref)).toThrow(
			expect.objectContaining({
				issues: [expect.objectContaining({ pointer: '/longRun/drivers/0/sign' })]
			})
		);
	});
});

describe('versions', () => {
	beforeEach(() => void declare());

	it('are numbered, and follow the one before', () => {
		const first = draft();
		expect(versionOf(bank.ctx, owner, first)).toMatchObject({ ref: 'M-001/1', ordinal: 1, reason: 'Next.' });
		const second = draft();
		expect(versionOf(bank.ctx, owner, second)).toMatchObject({ ref: 'M-001/2', predecessor: 'M-001/1' });
		expect(() => draftVersion(bank.ctx, owner, { model, specification: lossOnUnemployment() })).toThrow(
			expect.objectContaining({ issues: [expect.objectContaining({ pointer: '/reason' })] })
		);
		expect(() =>
			draftVersion(bank.ctx, owner, {
				model,
				specification: lossOnUnemployment(),
				reason: 'x',
				predecessor: 'M-001/9'
			})
		).toThrow(Invalid);
		expect(() => versionOf(bank.ctx, owner, 'M-001/9')).toThrow(Absent);
	});

	it('cannot change any more once submitted, in words and in the table', () => {
		const ref = draft();
		reviseDraft(bank.ctx, owner, ref, {
			specification: lossOnUnemployment({ standardErrors: 'hac' }),
			reason: 'HAC.'
		});
		submitVersion(bank.ctx, owner, ref);
		const before = versionOf(bank.ctx, owner, ref);
		expect(before).toMatchObject({ reason: 'HAC.', specification: { standardErrors: 'hac' } });
		expect(() => reviseDraft(bank.ctx, owner, ref, { specification: lossOnUnemployment() })).toThrow(
			'M-001/1 was submitted and cannot change any more; draft the next version instead.'
		);
		expect(() => submitVersion(bank.ctx, owner, ref)).toThrow(Conflict);
		expect(() => bank.ctx.write((tx) => tx.update('version', { ref }, { specification: '{}' }))).toThrow(
			'no fresh entry'
		);
		expect(versionOf(bank.ctx, owner, ref)).toEqual(before);
	});

	it('are withdrawn with a reason and stay readable', () => {
		const ref = draft();
		submitVersion(bank.ctx, owner, ref);
		expect(() => withdrawVersion(bank.ctx, owner, ref, '')).toThrow(Invalid);
		withdrawVersion(bank.ctx, owner, ref, 'The series was rebased.');
		expect(versionOf(bank.ctx, owner, ref)).toMatchObject({
			state: 'withdrawn',
			withdrawnReason: 'The series was rebased.'
		});
		expect(() => withdrawVersion(bank.ctx, owner, ref, 'again')).toThrow(Conflict);
		expect(listModels(bank.ctx, owner)[0]).toMatchObject({
			state: 'withdrawn',
			whole: { versions: '1 withdrawn' }
		});
	});

	it('are submitted by an owner, not by a developer, and hidden from others', () => {
		const developer = bank.person('R. Ellin', 'owner');
		const other = registerModel(bank.ctx, owner, modelInput({ developers: [developer.person as PersonId] }));
		declareSigns(bank.ctx, developer, { model: other, drivers: [unemploymentUp] });
		const ref = draftVersion(bank.ctx, developer, { model: other, specification: lossOnUnemployment() });
		expect(() => submitVersion(bank.ctx, developer, ref)).toThrow(Refused);
		submitVersion(bank.ctx, owner, ref);
		const stranger = bank.person('S. Oduya', 'owner');
		expect(() => versionOf(bank.ctx, stranger, ref)).toThrow(expect.objectContaining({ visible: false }));
	});

	it('are refused with a pointer into the specification', () => {
		expect(() => draft({ dependent: 'lost' })).toThrow(
			expect.objectContaining({
				issues: expect.arrayContaining([expect.objectContaining({ pointer: '/dependent' })])
			})
		);
		expect(() =>
			draft({
				claimed: {
					source: 'x',
					coefficients: [],
					residuals: { from: '2000-Q1', values: Array.from({ length: 4000 }, (_, i) => 1 / (i + 3)) }
				}
			})
		).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ pointer: '/claimed' })] }));
	});

	it('differ field by field, in words, series matched by name', () => {
		const before = draft();
		const series = [...lossOnUnemployment().series];
		const after = draft({
			series: [
				series[1]!,
				series[0]!,
				{ name: 'gdp', column: 'gdp', unit: 'index', transform: [{ step: 'log' }] }
			],
			shortRun: {
				own: [1, 2],
				drivers: [{ series: 'unemp', lags: [0, 2], sign: '+' }],
				constant: false
			},
			sample: { from: '2001-Q1', to: '2019-Q4' },
			claimed
		});
		// What both have comes in the order of the specification, what is new after it.
		expect(compareVersions(bank.ctx, owner, before, after)).toEqual([
			{ field: 'short run, lags of Δloss', before: '1', after: '1, 2' },
			{ field: 'short run, lags of Δunemp', before: '0', after: '0, 2' },
			{ field: 'sample from', before: '2000-Q1', after: '2001-Q1' },
			{ field: 'series gdp, column', after: 'gdp' },
			{ field: 'series gdp, unit', after: 'index' },
			{ field: 'series gdp, transforms', after: 'log' },
			{ field: 'claimed, source', after: 'Development paper, table 4' },
			{ field: 'claimed, gap(t−1)', after: '−0.3270 (0.077)' }
		]);
	});
});
