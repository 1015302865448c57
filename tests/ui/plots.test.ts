import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import AcfPlot from '$lib/ui/plots/AcfPlot.svelte';
import CusumPlot from '$lib/ui/plots/CusumPlot.svelte';
import CusumsqPlot from '$lib/ui/plots/CusumsqPlot.svelte';
import LevelPlot from '$lib/ui/plots/LevelPlot.svelte';
import PlumbLine from '$lib/ui/plots/PlumbLine.svelte';
import SupFPlot from '$lib/ui/plots/SupFPlot.svelte';

const periods = ['2019-Q3', '2019-Q4', '2020-Q1', '2020-Q2'];
const csvHref = '/runs/R-0207/series.csv?plot=x';

const bodies = {
	level: render(LevelPlot, {
		props: {
			periods,
			level: [5, 5.5, 6, 5],
			longRun: [5.1, 5.2, 5.3, 5.4],
			held: [null, null, 5.2, 5.1],
			levelLabel: 'loss rate',
			heldLabel: 'M-014/2, held',
			unit: '% a year',
			marks: [{ period: '2020-Q1', label: 'break, sup-F:', limit: true }],
			csvHref
		}
	}).body,
	plumb: render(PlumbLine, { props: { periods, gap: [-0.1, 0.3, 0.7, -0.4], sd: 0.2, csvHref } }).body,
	cusum: render(CusumPlot, { props: { periods, path: [0, 3, -5, 2], bound: [3, 4, 4.5, 5], csvHref } }).body,
	cusumsq: render(CusumsqPlot, {
		props: { periods, path: [0.2, 0.5, 0.7, 1], lower: [0, 0.2, 0.4, 0.7], upper: [0.5, 0.8, 1, 1], csvHref }
	}).body,
	supF: render(SupFPlot, { props: { periods, path: [3, 23.8, 5, 4], critical: 16.234, csvHref } }).body,
	acf: render(AcfPlot, { props: { acf: [0.1, -0.4, 0.05], bound: 0.22, csvHref } }).body
};

describe.each(Object.entries(bodies))('every plot: %s', (_, body) => {
	it('is an image with words, its CSV and a table of its numbers, without style attributes', () => {
		expect(body).toMatch(/role="img" aria-label="[^"]{30,}"/);
		expect(body).toContain(`href="${csvHref}"`);
		expect(body).toContain('<details');
		expect(body).not.toContain('style=');
		expect(body).not.toMatch(/NaN|Infinity|undefined/);
	});

	it('is drawn for wide and for narrow screens', () => {
		expect(body.match(/<svg/g)).toHaveLength(2);
	});
});

describe('what the plots say', () => {
	it('level: names series, dates and the version held', () => {
		expect(bodies.level).toContain(
			'aria-label="loss rate and its long run, and M-014/2, held, 2019-Q3 to 2020-Q2, % a year; break, sup-F: 2020-Q1"'
		);
		for (const line of ['class="observed', 'class="fitted', 'class="held', 'class="gap'])
			expect(bodies.level).toContain(line);
	});

	it('plumb line: counts what lies beyond the limits and writes the last point', () => {
		expect(bodies.plumb).toContain('last −2.0; 1 period beyond 2 s.d.');
		expect(bodies.plumb.match(/<circle class="beyond/g)).toHaveLength(2);
	});

	it('CUSUM: names the first crossing of its bounds on either side', () => {
		expect(bodies.cusum).toContain('outside its 5 % bounds in 1 period, first at 2020-Q1');
		expect(bodies.cusumsq).toContain('inside its 5 % bounds throughout');
	});

	it('sup-F: labels the largest value and the critical value', () => {
		expect(bodies.supF).toContain('largest 23.80 at 2019-Q4; 5 % critical value 16.23');
		expect(bodies.supF).toContain('23.80 at 2019-Q4</text>');
	});

	it('ACF: names the lags outside the band', () => {
		expect(bodies.acf).toContain('bounds ±0.22; outside at lag 2');
	});

	it('puts the numbers themselves into the table', () => {
		expect(bodies.level).toMatch(/<th scope="row"[^>]*>2020-Q1<\/th>/);
		expect(bodies.level).toContain('>5.3000</td>');
		expect(bodies.plumb).toContain('>3.5000</td>');
	});
});
