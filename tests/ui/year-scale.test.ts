import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import { yearScale, type YearMark } from '$lib/ui/year-scale';
import YearScale from '$lib/ui/YearScale.svelte';

const mark = (date: string, overdue?: boolean): YearMark => ({
	date,
	label: `review ${date}`,
	href: '/x',
	overdue
});

describe('the year scale', () => {
	const scale = yearScale('2026-12-16', [
		mark('2027-03-31'),
		mark('2026-12-31'),
		mark('2026-11-20'),
		mark('2028-01-01')
	]);

	it('runs twelve months from that of today and names the year where it changes', () => {
		expect(scale.months).toHaveLength(12);
		expect(scale.months.slice(0, 3).map(({ label }) => label)).toEqual(['Dec 2026', 'Jan 2027', 'Feb']);
		expect(scale.months.at(-1)?.label).toBe('Nov');
	});

	it('places days within months of equal width', () => {
		expect(scale.today).toBeCloseTo((15 / 31 / 12) * 100, 10);
		expect(scale.ticks.map(({ mark: { date } }) => date)).toEqual(['2026-12-31', '2027-03-31']);
		expect(scale.ticks[1]?.left).toBeCloseTo(((3 + 30 / 31) / 12) * 100, 10);
	});

	it('holds what is past as overdue, and says all in words', () => {
		expect(scale.overdue.map(({ date }) => date)).toEqual(['2026-11-20']);
		expect(scale.text).toBe('The coming twelve months: 1 date overdue; due 2026-12-31, 2027-03-31');
		expect(yearScale('2026-01-01', []).text).toBe('The coming twelve months: 0 dates overdue; nothing due');
	});

	it('places a leap day', () => {
		expect(yearScale('2028-02-01', [mark('2028-02-29')]).ticks[0]?.left).toBeCloseTo(
			(28 / 29 / 12) * 100,
			10
		);
	});

	it('is one link for the keyboard, with its text equivalent', () => {
		const { body } = render(YearScale, { props: { today: '2026-12-16', marks: [mark('2027-03-31')] } });
		expect(body).toContain('aria-label="The coming twelve months: 0 dates overdue; due 2027-03-31"');
		expect(body.match(/<a /g)).toHaveLength(2);
		expect(body.match(/tabindex="-1"/g)).toHaveLength(1);
	});
});
