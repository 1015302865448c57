import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { isRefusal, type Refusal } from '$lib/econometrics/refusal';
import { constant, indicator, seasonalDummies, trend } from '$lib/econometrics/series/deterministic';
import { inverseTransform } from '$lib/econometrics/series/inverse-transform';
import { difference, differenceLag, levelLag } from '$lib/econometrics/series/lags';
import { offsetOf, parsePeriod, periodAt, periodOfYear, timelineOf } from '$lib/econometrics/series/timeline';
import { completeCases, transform } from '$lib/econometrics/series/transform';
import type { TransformStep } from '$lib/econometrics/series/transform-step';

function must<T>(value: T | Refusal): T {
	if (isRefusal(value)) throw new Error(`${value.refused}: ${value.detail}`);
	return value;
}

const quarters = must(
	timelineOf(['1999-Q3', '1999-Q4', '2000-Q1', '2000-Q2', '2000-Q3', '2000-Q4', '2001-Q1', '2001-Q2'])
);
const none = new Map<string, Float64Array>();
const run = (v: (number | null)[], steps: TransformStep[], columns = none) =>
	transform('v', v, steps, quarters, columns);
const values = (v: (number | null)[], steps: TransformStep[], columns = none) => [
	...must(run(v, steps, columns)).values
];

describe('timeline', () => {
	it('reads the three frequencies and writes them back', () => {
		expect(parsePeriod('1974')).toEqual({ frequency: 'annual', number: 1974 });
		expect(parsePeriod('1974-Q3')).toEqual({ frequency: 'quarterly', number: 7898 });
		expect(parsePeriod('1974-03')).toEqual({ frequency: 'monthly', number: 23690 });
		expect(['1974-Q5', '1974-13', '74', 'x', ''].map(parsePeriod)).toEqual(Array(5).fill(undefined));
		expect([0, 1, 2, 7].map((i) => periodAt(quarters, i))).toEqual([
			'1999-Q3',
			'1999-Q4',
			'2000-Q1',
			'2001-Q2'
		]);
		expect(periodAt(must(timelineOf(['1999-12'])), 1)).toBe('2000-01');
	});

	it('knows the place within the year and within the timeline', () => {
		expect([0, 1, 2].map((i) => periodOfYear(quarters, i))).toEqual([3, 4, 1]);
		expect(offsetOf(quarters, '2001-Q2')).toBe(7);
		expect(offsetOf(quarters, '2001')).toBeUndefined();
	});

	it.each([
		[[], 'too-short'],
		[['1999-Q1', '1999-Q2', '1999-Q2'], 'duplicate'],
		[['1999-Q1', '1999-Q3'], 'gap'],
		[['1999-Q2', '1999-Q1', '1999-Q2'], 'gap'],
		[['1999-Q1', '1999-04'], 'frequency'],
		[['first'], 'frequency']
	] as const)('refuses %j as %s', (periods, reason) => {
		expect(timelineOf(periods)).toMatchObject({ refused: reason });
	});
});

describe('transform', () => {
	const v = [2, 4, 8, 16, 32, 64, 128, 256];

	it('applies each step as defined', () => {
		expect(values(v, [{ step: 'log' }])[1]).toBe(Math.log(4));
		expect(values(v, [{ step: 'diff' }]).slice(1)).toEqual([2, 4, 8, 16, 32, 64, 128]);
		expect(values(v, [{ step: 'yoy' }]).slice(4)).toEqual([1500, 1500, 1500, 1500]);
		expect(values(v, [{ step: 'log-diff' }])[3]).toBeCloseTo(Math.LN2, 15);
		expect(values(v, [{ step: 'log-yoy' }])[4]).toBeCloseTo(4 * Math.LN2, 15);
		expect(values(v, [{ step: 'scale', by: 0.5 }])).toEqual([1, 2, 4, 8, 16, 32, 64, 128]);
		expect(values(v, [{ step: 'sum', of: 3 }]).slice(2)).toEqual([14, 28, 56, 112, 224, 448]);
		expect(values(v, [{ step: 'mean', of: 2 }]).slice(1)).toEqual([3, 6, 12, 24, 48, 96, 192]);
		expect(values(v, [{ step: 'lag', by: 2 }]).slice(2)).toEqual([2, 4, 8, 16, 32, 64]);
		expect(values([0.5, 0.2, 0.5, 0.5, 0.5, 0.5, 0.5, 0.5], [{ step: 'logit' }])[1]).toBeCloseTo(
			Math.log(0.25),
			15
		);
	});

	it('divides by another column', () => {
		const columns = new Map([['w', Float64Array.from([1, 2, 4, 4, 4, 4, 4, 4])]]);
		expect(values(v, [{ step: 'ratio', column: 'w' }], columns).slice(0, 4)).toEqual([2, 2, 2, 4]);
		expect(values(v, [{ step: 'deflate', column: 'w' }], columns).slice(0, 3)).toEqual([200, 200, 200]);
	});

	it('trims blanks at the ends and keeps the alignment', () => {
		const out = must(run([null, 1, 2, 4, 8, 16, 32, null], [{ step: 'diff' }]));
		expect([out.first, out.last]).toEqual([2, 6]);
		expect([...out.values.slice(2, 7)]).toEqual([1, 2, 4, 8, 16]);
	});

	it('cuts several series to the periods they share', () => {
		const a = must(run(v, [{ step: 'diff' }]));
		const b = must(transform('b', [1, 2, 3, 4, 5, 6, null, null], [], quarters, none));
		expect(must(completeCases([a, b])).map((s) => s.length)).toEqual([5, 5]);
		const late = must(transform('c', [null, null, null, null, null, null, 1, 2], [], quarters, none));
		expect(completeCases([b, late])).toMatchObject({ refused: 'too-short' });
	});

	it.each([
		[[1, 2, null, 4, 5, 6, 7, 8], [], 'gap', '2000-Q1'],
		[[1, 2, Infinity, 4, 5, 6, 7, 8], [], 'non-finite', '2000-Q1'],
		[[1, 2, 0, 4, 5, 6, 7, 8], [{ step: 'log' }], 'domain', '2000-Q1'],
		[[1, 2, 50, 4, 5, 6, 7, 8], [{ step: 'logit' }], 'domain', 'divided by 100'],
		[[1, 0, 1, 4, 5, 6, 7, 8], [{ step: 'yoy' }], 'domain', '2000-Q4'],
		[[1, 2, -1, 4, 5, 6, 7, 8], [{ step: 'log-yoy' }], 'domain', '2000-Q1'],
		[[1, 2, 3, 4, 5, 6, 7, 8], [{ step: 'ratio', column: 'absent' }], 'domain', 'column'],
		[[1, 2, null, null, null, null, null, null], [{ step: 'yoy' }], 'too-short', 'v'],
		[Array(8).fill(null), [], 'too-short', 'v']
	] as [(number | null)[], TransformStep[], string, string][])(
		'refuses %j %j as %s',
		(v, steps, reason, words) => {
			const out = run(v, steps);
			expect(out).toMatchObject({ refused: reason });
			expect((out as Refusal).detail).toContain(words);
		}
	);
});

describe('inverse transform', () => {
	const own = fc.oneof(
		fc.constantFrom<TransformStep>(
			{ step: 'log' },
			{ step: 'diff' },
			{ step: 'yoy' },
			{ step: 'log-diff' },
			{ step: 'log-yoy' },
			{ step: 'scale', by: 0.01 },
			{ step: 'ratio', column: 'w' },
			{ step: 'deflate', column: 'w' }
		),
		fc.integer({ min: 2, max: 5 }).map((of): TransformStep => ({ step: 'mean', of })),
		fc.integer({ min: 2, max: 5 }).map((of): TransformStep => ({ step: 'sum', of })),
		fc.integer({ min: 1, max: 3 }).map((by): TransformStep => ({ step: 'lag', by }))
	);
	const months = must(
		timelineOf(
			Array.from({ length: 60 }, (_, i) => periodAt({ frequency: 'monthly', perYear: 12, first: 24000 }, i))
		)
	);
	const known = 48;

	it('leads back to the data for any chain', () => {
		const positive = fc.array(fc.double({ min: 0.5, max: 2, noNaN: true }), { minLength: 60, maxLength: 60 });
		let reached = 0;
		fc.assert(
			fc.property(positive, positive, fc.array(own, { minLength: 1, maxLength: 3 }), (v, w, steps) => {
				const columns = new Map([['w', Float64Array.from(w)]]);
				const whole = transform('v', v, steps, months, columns);
				const cut = transform(
					'v',
					v.map((x, t) => (t < known ? x : null)),
					steps,
					{ ...months, length: known },
					columns
				);
				// A chain such as diff, log leaves the domain; that is refused elsewhere.
				if (isRefusal(whole) || isRefusal(cut)) return;
				// A growth rate on a base that is rounding error loses every digit, whatever inverts it.
				if (whole.values.some((x) => Math.abs(x) > 1e6)) return;
				const history = { ...cut, last: known - 1 };
				const path = whole.values.slice(known);
				const future = new Map([['w', Float64Array.from(w.slice(known))]]);
				const back = must(inverseTransform(path, steps, history, 12, future));
				const worst = Math.max(...[...back].map((x, h) => Math.abs(x - v[known + h]!)));
				expect(worst).toBeLessThan(1e-8);
				reached++;
			}),
			{ numRuns: 400 }
		);
		expect(reached).toBeGreaterThan(200);
	});

	it('leads back from a share', () => {
		const share = Array.from({ length: 60 }, (_, t) => 0.1 + 0.01 * t);
		const cut = must(transform('v', share.slice(0, known), [{ step: 'logit' }], months, none));
		const path = Float64Array.from(share.slice(known), (p) => Math.log(p / (1 - p)));
		const back = must(inverseTransform(path, [{ step: 'logit' }], cut, 12, none));
		expect(back[5]).toBeCloseTo(share[known + 5]!, 14);
	});

	it('refuses without the path of a divisor, and a horizon inside the lag', () => {
		const columns = new Map([['w', new Float64Array(60).fill(2)]]);
		const ratio: TransformStep[] = [{ step: 'ratio', column: 'w' }];
		const cut = must(transform('v', Array(60).fill(1), ratio, months, columns));
		expect(inverseTransform(new Float64Array(4), ratio, cut, 12, none)).toMatchObject({
			refused: 'no-scenario'
		});
		const lag: TransformStep[] = [{ step: 'lag', by: 4 }];
		const late = must(transform('v', Array(60).fill(1), lag, months, none));
		expect(inverseTransform(new Float64Array(4), lag, late, 12, none)).toMatchObject({ refused: 'lag' });
	});
});

describe('regressors', () => {
	const v = Float64Array.from([1, 4, 9, 16, 25, 36]);

	it('are named and aligned', () => {
		expect(difference(v)).toEqual(Float64Array.from([3, 5, 7, 9, 11]));
		expect(levelLag('y', v, 1, 2, 5)).toEqual({ name: 'y.l1', column: Float64Array.from([4, 9, 16, 25]) });
		expect(differenceLag('x.a', v, 1, 2, 5)).toEqual({
			name: 'd.x.a.l1',
			column: Float64Array.from([3, 5, 7, 9])
		});
		expect(differenceLag('y', v, 0, 1, 2).column).toEqual(Float64Array.from([3, 5]));
	});

	it('count the trend from the start of the sample and leave out the last season', () => {
		expect(constant(2)).toEqual({ name: 'const', column: Float64Array.from([1, 1]) });
		expect(trend(3, 3).column).toEqual(Float64Array.from([3, 4, 5]));
		const seasons = seasonalDummies(4, 3, 6);
		expect(seasons.map((s) => s.name)).toEqual(['s1', 's2', 's3']);
		expect(seasons.map((s) => [...s.column])).toEqual([
			[0, 0, 1, 0, 0, 0],
			[0, 0, 0, 1, 0, 0],
			[1, 0, 0, 0, 1, 0]
		]);
		expect(indicator('D', 1, 2, 4).column).toEqual(Float64Array.from([0, 1, 1, 0]));
	});
});
