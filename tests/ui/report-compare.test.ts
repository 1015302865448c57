import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import { compareRuns, type RunEvidence } from '$lib/server/runs/compare';
import CompareCauses from '$lib/ui/report/CompareCauses.svelte';
import CompareChecks from '$lib/ui/report/CompareChecks.svelte';
import CompareCoefficients from '$lib/ui/report/CompareCoefficients.svelte';
import { causeSentence, checkPairGroups } from '$lib/ui/report/compare-rows';
import type { RunRequest } from '$lib/domain/run';
import { computed, facts, requested, specification } from './report-result';

const textOf = (html: string): string =>
	html
		.replace(/<!--.*?-->/gs, '')
		.replace(/<[^>]+>/g, ' ')
		.replace(/[\s\u00a0]+/g, ' ');

const evidence = (ref: string, changes: Partial<RunRequest> = {}): RunEvidence => ({
	view: facts({ ref }),
	request: requested(changes),
	result: computed(changes)
});

const whole = evidence('R-0001');
const sample = { from: '1975-Q1', to: '2009-Q3' };
const comparison = compareRuns(whole, evidence('R-0002', { specification: { ...specification, sample } }));

describe('two runs side by side', () => {
	it('names what was not the same', () => {
		expect(causeSentence(comparison.causes, comparison.digest)).toBe(
			'Not the same: the sample; the results differ.'
		);
		const { body } = render(CompareCauses, {
			props: { causes: comparison.causes, a: 'R-0001', b: 'R-0002' }
		});
		expect(textOf(body)).toMatch(/Sample sample from 1959-Q1 1975-Q1/);
	});

	it('shows each coefficient of both, their difference, and both intervals on one axis', () => {
		const { body } = render(CompareCoefficients, {
			props: { pairs: comparison.coefficients, a: 'R-0001', b: 'R-0002' }
		});
		expect(body.match(/<svg width="256"/g)).toHaveLength(comparison.coefficients.length);
		const [speed] = comparison.coefficients;
		const decimals = /speed of adjustment (0\.\d+)/.exec(textOf(body))![1]!.length - 2;
		expect(decimals).toBeGreaterThanOrEqual(4);
		const sign = speed!.difference! < 0 ? '−' : '+';
		const size = Math.abs(speed!.difference!).toFixed(decimals);
		expect(textOf(body)).toContain(`${sign}${size}`);
		expect(body).toMatch(/aria-label="R-0001 [^"]*; R-0002 /);
	});

	it('marks each verdict that moved, with the figures of both', () => {
		const moved = comparison.checks.filter((pair) => pair.moved);
		expect(moved.length).toBeGreaterThan(0);
		const { body } = render(CompareChecks, {
			props: { pairs: comparison.checks, a: 'R-0001', b: 'R-0002' }
		});
		expect(body.match(/<tr[^>]* class="query/g)).toHaveLength(moved.length);
		expect(textOf(body).match(/ moved /g)).toHaveLength(moved.length);
		expect(checkPairGroups(comparison.checks).flatMap(({ rows }) => rows)).toHaveLength(
			comparison.checks.length
		);
	});

	it('says so when nothing differed', () => {
		const same = compareRuns(whole, evidence('R-0003'));
		expect(causeSentence(same.causes, same.digest)).toBe(
			'Nothing that a result depends on differs, and the two results have one digest.'
		);
		expect(same.checks.some(({ moved }) => moved)).toBe(false);
		expect(causeSentence([], 'different')).toContain('was not computed as recorded');
	});
});
