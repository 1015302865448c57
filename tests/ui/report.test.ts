import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import { policyLine } from '$lib/domain/policy';
import { latestRelease } from '$lib/server/policy/released';
import Overrides from '$lib/ui/report/Overrides.svelte';
import Report from '$lib/ui/report/Report.svelte';
import RunNote from '$lib/ui/report/RunNote.svelte';
import UnderWay from '$lib/ui/report/UnderWay.svelte';
import { policyLineView } from '$lib/ui/report/policy-lines';
import type { RunFacts } from '$lib/ui/report/run-facts';
import type { RunResult } from '$lib/domain/run-result';
import { computed, facts, shortSpecification, specification } from './report-result';

const { policy, digest } = latestRelease();

const linesOf = (result: RunResult) =>
	Object.fromEntries(
		result.checks
			.flatMap(({ thresholdFrom }) => thresholdFrom)
			.map((path) => [path, policyLineView(policyLine(policy, path)!, path, digest)])
	);

const report = (result: RunResult, run: RunFacts = facts()): string =>
	render(Report, {
		props: {
			run,
			result,
			vintage: { vintageDate: '2010-01-31' },
			policyRelease: policy.release,
			lines: linesOf(result),
			csv: (plot: string) => `/runs/${run.ref}/series.csv?plot=${plot}`
		}
	}).body;

/** Text of a piece of HTML: tags and comments gone, runs of blanks one. */
const textOf = (html: string): string =>
	html
		.replace(/<!--.*?-->/gs, '')
		.replace(/<[^>]+>/g, ' ')
		.replace(/&lt;/g, '<')
		.replace(/[\s\u00a0]+/g, ' ')
		.trim();

const result = computed();
const body = report(result);
const text = textOf(body);
/** The row of one check, with its evidence up to the next check's row. */
const rowOf = (id: string, html = body): string =>
	textOf(
		html
			.split(/<tr(?=[^>]* id="check-)/)
			.find((piece) => piece.split('>')[0]!.includes(`id="check-${id}"`)) ?? ''
	);

describe('the report of US consumption', () => {
	it('has no style attribute, no element left empty by a bad number', () => {
		expect(body).not.toContain('style=');
		expect(text).not.toMatch(/NaN|Infinity|undefined|null,|\[object/);
	});

	it('shows the equation with its figures and the computed sentences', () => {
		const equation = /role="math" aria-label="([^"]*)"/.exec(body)?.[1];
		expect(equation).toContain('+ 0.3256 (0.0457) Δincome(t)');
		expect(equation).toContain('− 0.1178 (0.0273) [ consumption(t−1)');
		expect(text).toContain('11.8 % of the equilibrium error (gap) in a quarter');
		expect(text).toContain('1 % more income is associated with 1.03 % more consumption in the long run');
	});

	it('says first what is open, with links to the rows', () => {
		const open = result.checks.filter(({ verdict }) => verdict !== null && verdict !== 'holds');
		expect(open.length).toBeGreaterThan(1);
		expect(text).toContain(`${open.length} results are not holds`);
		for (const { id } of open) expect(body).toContain(`href="#check-${id.replaceAll('.', '-')}"`);
		expect(body.indexOf('id="open"')).toBeLessThan(body.indexOf('id="checks"'));
	});

	it('gives every check a row with its title, and no two one id', () => {
		const rows = [...body.matchAll(/ id="(check-[^"]+)"/g)].map(([, id]) => id);
		const judged = result.checks.filter(({ group }) => group !== 'family');
		expect(rows).toHaveLength(judged.length);
		expect(new Set(rows).size).toBe(rows.length);
	});

	it.each([
		['cointegration-engle-granger', ['−4.208', '−3.783', '0.013', '200', 'the levels do not cointegrate']],
		['residual-autocorrelation', ['2.265', '0.064', 'Godfrey 1978', 'order 1', '0.623', '0.431']],
		['stability-sup-f', ['22.814', '23.584', '0.064', 'Andrews 1993', 'trim 0.15']],
		['cointegration-bounds', ['6.717', '3.790 · 4.850', 'all I(0) · all I(1)']],
		['long-run-range', ['−0.00653', '−0.0200 to 0', 'declared', 'interval −0.00893 to −0.00412']],
		['long-run-signs', ['declared', '−']],
		['design-collinearity', ['42.465', '30 policy']],
		['residual-stationarity-held', ['not assessable', 'no approved version']]
	])('%s: figures, null, source and policy line', (id, pieces) => {
		const row = rowOf(id);
		for (const piece of pieces) expect(row).toContain(piece);
	});

	it('opens the evidence of what is not in order, and links each policy line', () => {
		const evidence = (id: string): string =>
			new RegExp(`id="check-${id}".*?<details([^>]*)>`, 's').exec(body)?.[1] ?? '';
		expect(evidence('design-collinearity')).toContain('open');
		expect(evidence('residual-arch')).not.toContain('open');
		for (const path of result.checks.flatMap(({ thresholdFrom }) => thresholdFrom))
			expect(body).toContain(`href="/policy?policy=${digest}#${path}"`);
	});

	it('lists claims as typed beside its own figures', () => {
		const section = textOf(/id="replication".*?<\/section>/s.exec(body)?.[0] ?? '');
		expect(section).toContain('A paper table, figures as printed');
		expect(section).toMatch(/rate, long run yes −0\.0065 −0\.00652733|rate, long run yes −0\.0065 −0\.00653/);
		expect(section).toContain('All 4 claimed figures come out to the digits claimed.');
	});

	it('shows estimates with delta-method errors, speed, half-life with its interval', () => {
		const section = textOf(/id="estimates".*?<\/section>/s.exec(body)?.[0] ?? '');
		expect(section).toContain('standard errors by the delta method');
		expect(section).toMatch(/income 1\.025236 0\.006983 146\.815 < 0\.001/);
		expect(section).toMatch(/speed of adjustment 0\.117831 0\.027299 4\.316 < 0\.001/);
		expect(section).toMatch(/half-life of a shock, quarters 6\.719 .*95 % interval 3\.96 to 9\.48/);
	});

	it('sets the two cheaper models beside it', () => {
		const section = textOf(/id="companions".*?<\/section>/s.exec(body)?.[0] ?? '');
		expect(section).toMatch(/differences only explains the change 200 7/);
		expect(section).toMatch(/levels only explains the level 203 3/);
	});

	it('draws every path of the result with its CSV', () => {
		for (const plot of ['level', 'gap', 'cusum', 'cusumsq', 'sup-f', 'acf'])
			expect(body).toContain(`href="/runs/R-0207/series.csv?plot=${plot}"`);
	});

	it('says how many false alarms chance explains', () => {
		expect(text).toContain('chance explains');
	});
});

describe('other results', () => {
	it('names the checks that the policy switches off for the tier', () => {
		const third = computed({ tier: 3 });
		expect(third.switchedOff).toContain('cointegration.bounds');
		expect(textOf(report(third, facts({ tier: 3 })))).toMatch(
			/Switched off by the policy for tier 3: [^.]*Bounds/
		);
	});

	it('marks a claim that does not replicate', () => {
		const claimed = {
			...specification.claimed!,
			coefficients: [{ term: 'ec.l1', value: '-0.125' }]
		};
		const wrong = computed({ specification: { ...specification, claimed } });
		const section = /id="replication".*?<\/section>/s.exec(report(wrong))?.[0] ?? '';
		expect(section).toMatch(/<tr class="[^"]*fails/);
		expect(textOf(section)).toMatch(/gap\(t−1\) no −0\.125/);
	});

	it('shows a replaced setting with its reason, beside the policy and the default outcome', () => {
		const setting = 'levels/query';
		const settings = [{ setting, value: 0.1, reason: 'The committee asked for a stricter level.' }];
		const strict = computed({ settings });
		const html = report(strict, facts({ settings }));
		expect(textOf(html)).toContain('The committee asked for a stricter level.');
		const changed = strict.checks.filter(({ byDefault }) => byDefault);
		expect(changed.length).toBeGreaterThan(0);
		expect(rowOf(changed[0]!.id.replaceAll('.', '-'), html)).toContain("By the policy's own settings:");
		const lines = { [setting]: policyLineView(policyLine(policy, setting)!, setting, digest) };
		expect(textOf(render(Overrides, { props: { settings, lines } }).body)).toMatch(
			/levels\/query 0\.1 0\.05/
		);
	});

	it('says why nothing was estimated, and keeps every check with its reason', () => {
		const short = computed({ specification: shortSpecification });
		expect(short.estimates).toBeNull();
		const html = report(short);
		expect(textOf(html)).toContain('Nothing was estimated');
		expect(html).not.toContain('id="estimates"');
		expect(rowOf('stability-sup-f', html)).toContain('Not assessable:');
	});
});

describe('a run as a whole', () => {
	it('counts reruns of the request and compares digests', () => {
		const note = (run: RunFacts): string =>
			textOf(render(RunNote, { props: { run, policyRelease: policy.release } }).body);
		expect(note(facts())).toContain('third of 3 runs of this request, digest equal');
		const alone = { nth: 1, of: 1, refs: ['R-0207'], digest: 'alone' } as const;
		expect(note(facts({ reruns: alone }))).not.toContain('runs of this request');
	});

	it('shows progress and, to who may, the way to cancel', () => {
		const progress = { done: 12, of: 31, label: 'sup-F' };
		const html = render(UnderWay, {
			props: { run: facts({ state: 'running', progress, mayCancel: true }) }
		}).body;
		expect(textOf(html)).toContain('check 12 of 31, sup-F');
		expect(html).toMatch(/<form method="post" action="\?\/cancel"/);
		const other = render(UnderWay, { props: { run: facts({ state: 'queued' }) } }).body;
		expect(textOf(other)).toContain('waiting for a free thread');
		expect(other).not.toContain('<form');
	});
});
