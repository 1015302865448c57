import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import DataTable from '$lib/ui/DataTable.svelte';
import {
	addressWith,
	choicesOf,
	compareValues,
	groupRuns,
	readTableState,
	sortAddress,
	type Column
} from '$lib/ui/table-state';

interface Model {
	ref: string;
	tier: number;
	owner: string;
	gap: number | null;
}
const models: Model[] = [
	{ ref: 'M-014', tier: 1, owner: 'T. Halvar', gap: 1.6 },
	{ ref: 'M-003', tier: 2, owner: 'S. Oduya', gap: null },
	{ ref: 'M-021', tier: 1, owner: 'S. Oduya', gap: -2.2 }
];
const columns: Column<Model>[] = [
	{ id: 'ref', header: 'ref', value: (m) => m.ref },
	{ id: 'tier', header: 'tier', value: (m) => m.tier, align: 'right', filter: 'choice' },
	{ id: 'owner', header: 'owner', value: (m) => m.owner, filter: 'text' },
	{ id: 'gap', header: 'gap', value: (m) => m.gap, align: 'right', decimals: 1, group: 'last quarter' }
];

function rendered(query: string, more: { rows?: Model[]; pageSize?: number } = {}) {
	const url = new URL(`https://bank.example/models${query}`);
	const props = {
		rows: models,
		columns,
		url,
		caption: 'models',
		noun: 'model',
		rowKey: (m: Model) => m.ref,
		...more
	};
	const { body } = render(DataTable<Model>, { props });
	const refs = [...body.matchAll(/scope="row"[^>]*>(?:<!--.*?-->)*(M-\d+)/g)].map((match) => match[1]);
	return { body, refs };
}

describe('state in the address', () => {
	const params = new URLSearchParams('sort=-gap&tier=1&owner=&find=loan&page=3&other=x');

	it('is read', () => {
		expect(readTableState(params, columns)).toEqual({
			sort: { id: 'gap', desc: true },
			filters: [{ id: 'tier', value: '1' }],
			find: 'loan',
			page: 3
		});
	});

	it.each(['sort=password', 'page=-1', 'page=x', 'page=1e99'])('ignores %s', (query) => {
		expect(readTableState(new URLSearchParams(query), columns)).toMatchObject({ sort: null, page: 1 });
	});

	it('is written, keeping what is not its own', () => {
		const url = new URL('https://bank.example/log?after=5&page=2');
		expect(addressWith(url, { page: '', tier: 'a b' })).toBe('/log?after=5&tier=a+b');
		expect(addressWith(new URL('https://bank.example/log?page=2'), { page: '' })).toBe('/log');
	});

	it('turns a head from ascending to descending to none', () => {
		const at = (query: string): string => {
			const url = new URL(`https://bank.example/models?${query}`);
			return sortAddress(url, readTableState(url.searchParams, columns), 'tier');
		};
		expect(at('page=2')).toBe('/models?sort=tier');
		expect(at('sort=tier')).toBe('/models?sort=-tier');
		expect(at('sort=-tier')).toBe('/models');
	});
});

describe('order, choices, groups', () => {
	it('orders numbers by size and references by their figures', () => {
		expect([10, 9, -1].sort(compareValues)).toEqual([-1, 9, 10]);
		expect(['R-10', 'R-9'].sort(compareValues)).toEqual(['R-9', 'R-10']);
	});

	it('offers each value once', () => {
		expect(choicesOf(models, columns[1]!)).toEqual(['1', '2']);
	});

	it('joins neighbouring columns under one head', () => {
		expect(groupRuns([{}, { group: 'a' }, { group: 'a' }, {}])).toEqual([
			{ group: '', span: 1 },
			{ group: 'a', span: 2 },
			{ group: '', span: 1 }
		]);
	});
});

describe('the table on the server', () => {
	it('sorts by the address, what is absent last in both directions', () => {
		expect(rendered('').refs).toEqual(['M-014', 'M-003', 'M-021']);
		expect(rendered('?sort=gap').refs).toEqual(['M-021', 'M-014', 'M-003']);
		expect(rendered('?sort=-gap').refs).toEqual(['M-014', 'M-021', 'M-003']);
	});

	it('filters by the address', () => {
		expect(rendered('?tier=1').refs).toEqual(['M-014', 'M-021']);
		expect(rendered('?tier=1&owner=oduya').refs).toEqual(['M-021']);
		expect(rendered('?find=halvar').refs).toEqual(['M-014']);
		expect(rendered('?find=halvar').body).toContain('1 of 3 models');
		expect(rendered('?find=nobody').body).toContain('Nothing matches these filters.');
	});

	it('pages by the address and keeps the filters in the links', () => {
		const { refs, body } = rendered('?sort=ref&page=2', { pageSize: 2 });
		expect(refs).toEqual(['M-021']);
		expect(body).toContain('page 2 of 2');
		expect(body).toContain('href="/models?sort=ref"');
	});

	it('shows the last page when the address asks for one beyond it', () => {
		expect(rendered('?page=9', { pageSize: 2 }).refs).toEqual(['M-021']);
	});

	it('has heads that are links, says the order, and heads each row', () => {
		const { body } = rendered('?sort=-tier');
		expect(body).toContain('aria-sort="descending"');
		expect(body).toContain('href="/models?sort=owner"');
		expect(body).toContain('scope="row"');
		expect(body).toContain('last quarter');
		expect(body).toContain('−2.2');
		expect(body).not.toContain('style=');
	});

	it('keeps a choice selected in a form that works without scripts', () => {
		const { body } = rendered('?tier=2&sort=ref');
		expect(body).toMatch(/<option value="2" selected(="")?>/);
		expect(body).toMatch(/<input type="hidden" name="sort" value="ref"/);
		expect(body).toContain('method="get"');
	});
});
