import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import { fieldChanges, leafText } from '$lib/ui/changes';
import Diff from '$lib/ui/Diff.svelte';

describe('field-level differences', () => {
	it('walks records and lists of records, and takes lists of plain values whole', () => {
		const before = {
			sample: { from: '1990-Q1', to: '2019-Q4' },
			drivers: [{ series: 'income', lags: [0, 2] }]
		};
		const after = { sample: { from: '1990-Q1', to: '2023-Q4' }, drivers: [{ series: 'income', lags: [0] }] };
		expect(fieldChanges(before, after)).toEqual([
			{ field: 'sample.to', before: '2019-Q4', after: '2023-Q4' },
			{ field: 'drivers.1.lags', before: [0, 2], after: [0] }
		]);
	});

	it('names every leaf of what came or went', () => {
		expect(fieldChanges({ a: 1 }, { a: 1, b: { c: null, d: 'x' } })).toEqual([
			{ field: 'b.c', before: undefined, after: null },
			{ field: 'b.d', before: undefined, after: 'x' }
		]);
		expect(fieldChanges(undefined, { a: 1 })).toEqual([{ field: 'a', before: undefined, after: 1 }]);
	});

	it('finds nothing between equals', () => {
		expect(fieldChanges({ a: [1, { b: 2 }] }, { a: [1, { b: 2 }] })).toEqual([]);
	});

	it('writes leaves as people read them', () => {
		expect(leafText([0, 2])).toBe('0, 2');
		expect(leafText(null)).toBe('none');
		expect(leafText([])).toBe('none');
		expect(leafText(false)).toBe('false');
	});
});

describe('the table of differences', () => {
	const rationale =
		'Consumption follows income in the long run because households keep a stable ratio of the two.';

	it('marks words in prose, whole values elsewhere', () => {
		const changes = fieldChanges(
			{ to: '2019-Q4', rationale },
			{ to: '2023-Q4', rationale: rationale.replace('stable', 'steady') }
		);
		const { body } = render(Diff, { props: { changes } });
		expect(body).toMatch(/<del[^>]*>2019-Q4<\/del>/);
		expect(body).toMatch(/<del[^>]*>stable<\/del>/);
		expect(body).toMatch(/<ins[^>]*>steady<\/ins>/);
		expect(body).not.toMatch(/<del[^>]*>Consumption/);
	});

	it('escapes what people typed', () => {
		const { body } = render(Diff, {
			props: { changes: [{ field: 'name', before: 'a', after: '<script>' }] }
		});
		expect(body).not.toContain('<script>');
		expect(body).toContain('&lt;script>');
	});

	it('says when nothing differs', () => {
		expect(render(Diff, { props: { changes: [] } }).body).toContain('No field differs.');
	});
});
