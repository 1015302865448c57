import { createRawSnippet } from 'svelte';
import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import Act from '$lib/ui/Act.svelte';
import Caution from '$lib/ui/Caution.svelte';
import Check from '$lib/ui/Check.svelte';
import ErrorSummary from '$lib/ui/ErrorSummary.svelte';
import Input from '$lib/ui/Input.svelte';
import Intervals from '$lib/ui/Intervals.svelte';
import Num from '$lib/ui/Num.svelte';
import PlumbScale from '$lib/ui/PlumbScale.svelte';
import Progress from '$lib/ui/Progress.svelte';
import Ref from '$lib/ui/Ref.svelte';
import Row from '$lib/ui/Row.svelte';
import Say from '$lib/ui/Say.svelte';
import Select from '$lib/ui/Select.svelte';
import Shell from '$lib/ui/Shell.svelte';
import TextArea from '$lib/ui/TextArea.svelte';
import Verdict from '$lib/ui/Verdict.svelte';

const text = (words: string) => createRawSnippet(() => ({ render: () => `<span>${words}</span>` }));

describe('frame', () => {
	const { body } = render(Shell, {
		props: {
			nav: [
				{ label: 'desk', href: '/' },
				{ label: 'models', href: '/models' }
			],
			current: '/models',
			who: { label: 'I. Marrow · validator', href: '/account' },
			find: '"><script>',
			today: '2026-12-01',
			marks: [],
			folio: 10482,
			at: '2026-12-01T14:02:33Z',
			children: text('the page')
		}
	});

	it('underlines the current page, finds by a plain form, and holds the page in main', () => {
		expect(body).toMatch(/<a href="\/models" aria-current="page"/);
		expect(body.match(/aria-current/g)).toHaveLength(1);
		expect(body).toMatch(/<form[^>]*action="\/models" method="get"/);
		expect(body).not.toContain('<script>');
		expect(body).toMatch(/<main[^>]*id="content"[^>]*>.*the page.*<\/main>/s);
	});

	it('ends in the folio line with the short caution', () => {
		expect(body).toMatch(/<a href="\/log\/10482"[^>]*>folio 10\u2009482 · 2026-12-01 14:02 UTC<\/a>/);
		expect(body).toContain("Supports, and does not replace, the institution's own model-risk governance.");
	});

	it('carries no style attribute', () => {
		expect(body).not.toContain('style=');
	});

	it('says the long caution word for word', () => {
		expect(render(Caution).body).toContain(
			"Keelbook supports the institution's own model-risk governance. It does not replace it, nor the judgement of qualified staff, nor the rules of the supervisor."
		);
	});

	it('sets a note beside what it annotates', () => {
		const row = render(Row, { props: { note: text('tier 1'), children: text('content') } }).body;
		expect(row.indexOf('tier 1')).toBeLessThan(row.indexOf('content'));
		expect(row).toContain('role="note"');
		expect(render(Row, { props: { children: text('content') } }).body).not.toContain('role="note"');
	});
});

describe('words and figures', () => {
	it.each(['holds', 'query', 'fails', 'not assessable'] as const)(
		'%s is a word beside its glyph',
		(verdict) => {
			const { body } = render(Verdict, { props: { verdict, reason: 'n = 11, 24 needed' } });
			expect(body).toContain('aria-hidden="true"');
			expect(body.replace(/<[^>]*>/g, '')).toContain(verdict);
			expect(body).toContain('n = 11, 24 needed');
		}
	);

	it('dashes the beam only where nothing was assessed', () => {
		expect(render(Verdict, { props: { verdict: 'not assessable' } }).body).toContain('stroke-dasharray');
		expect(render(Verdict, { props: { verdict: 'holds' } }).body).not.toContain('stroke-dasharray');
	});

	it('writes figures, p-values, units and what is absent', () => {
		const num = (props: { value: number | null; p?: boolean; unit?: string; decimals?: number }) =>
			render(Num, { props }).body.replace(/<[^>]*>/g, '');
		expect(num({ value: -0.5 })).toBe('−0.500');
		expect(num({ value: 0.0001, p: true })).toBe('<\u00a00.001'.replace('<', '&lt;'));
		expect(num({ value: 13.52, decimals: 1, unit: 'EUR m' })).toBe('13.5\u00a0EUR m');
		expect(num({ value: null })).toBe('·');
	});

	it('keeps periods and references of a sentence unbroken and marks the gap', () => {
		const { body } = render(Say, {
			props: {
				sentences: ['Since M-014/2.'],
				gap: { lead: 'In 2026-Q3 it stood ', marked: '1.6 s.d. above' }
			}
		});
		expect(body).toMatch(/whitespace-nowrap">M-014\/2</);
		expect(body).toMatch(/whitespace-nowrap">2026-Q3</);
		expect(body.replace(/<!--.*?-->/g, '')).toContain('<mark>1.6 s.d. above</mark>.');
	});
});

describe('references', () => {
	it.each([
		['M-014', '/models/M-014'],
		['M-014/3', '/models/M-014/versions/3'],
		['D-0051/2', '/data/D-0051/2'],
		['R-0207', '/runs/R-0207'],
		['E-12', '/log/12']
	])('%s leads to %s', (reference, href) => {
		expect(render(Ref, { props: { reference } }).body).toContain(`href="${href}"`);
	});

	it('is plain text when it names no page', () => {
		expect(render(Ref, { props: { reference: 'javascript:1' } }).body).not.toContain('href');
	});
});

describe('scales', () => {
	it('plumb scale: words the gap, colours only what lies beyond the limits', () => {
		const at = (value: number | null) =>
			render(PlumbScale, { props: { value, earlier: [1], period: '2026-Q3' } }).body;
		expect(at(-2.2)).toContain('aria-label="gap −2.2 standard deviations, 2026-Q3"');
		expect(at(-2.2)).toContain('class="beyond');
		expect(at(1.6)).not.toContain('class="beyond');
		expect(at(null)).not.toContain('<svg');
	});

	it('plumb scale: holds a far gap at its end', () => {
		expect(render(PlumbScale, { props: { value: 40 } }).body).toContain('M116.0 14');
	});

	it('intervals: one axis, claimed and owner and validator in words', () => {
		const { body } = render(Intervals, {
			props: {
				claimed: 0.345,
				owner: { value: 0.327, low: 0.17, high: 0.48 },
				validator: { value: 0.361, low: -0.2, high: 0.52 }
			}
		});
		expect(body).toContain('aria-label="claimed 0.345; owner 0.170 to 0.480; validator −0.200 to 0.520"');
		expect(body).toContain('class="zero');
	});
});

describe('forms', () => {
	it('ties label, hint and error to the control and keeps what was typed', () => {
		const { body } = render(Input, {
			props: {
				name: 'series[0].unit',
				label: 'Unit',
				hint: 'as in the source',
				error: 'Name a unit.',
				value: 'EUR "m"'
			}
		});
		expect(body).toContain('for="field-series-0-unit"');
		expect(body).toContain('aria-describedby="field-series-0-unit-hint field-series-0-unit-error"');
		expect(body).toContain('aria-invalid="true"');
		expect(body).toContain('value="EUR &quot;m&quot;"');
		expect(body).toMatch(/id="field-series-0-unit-error"[^>]*>Name a unit\./);
	});

	it('says nothing of errors where there are none', () => {
		const { body } = render(TextArea, { props: { name: 'why', label: 'Why', value: 'because', error: [] } });
		expect(body).not.toContain('aria-invalid');
		expect(body).not.toContain('aria-describedby');
		expect(body).toContain('>because</textarea>');
	});

	it('keeps choices and ticks', () => {
		const options = ['annual', 'quarterly'].map((value) => ({ value, label: value }));
		const select = render(Select, {
			props: { name: 'f', label: 'Frequency', options, value: 'quarterly' }
		}).body;
		expect(select).toMatch(/<option value="quarterly" selected(="")?>/);
		expect(render(Check, { props: { name: 'c', label: 'Constant', checked: true } }).body).toMatch(
			/ checked(=""|\s|\/|>)/
		);
	});

	it('lists errors as links to their fields, announced', () => {
		const { body } = render(ErrorSummary, {
			props: {
				errors: [
					{ field: 'name', message: 'Give it a name.' },
					{ field: '', message: 'Declare signs first.' }
				]
			}
		});
		expect(body).toContain('role="alert"');
		expect(body).toContain('<a href="#field-name">Give it a name.</a>');
		expect(body.match(/<a /g)).toHaveLength(1);
		expect(render(ErrorSummary, { props: { errors: [] } }).body).not.toContain('alert');
	});

	it('acts are links with an address, else buttons', () => {
		expect(render(Act, { props: { href: '/x', children: text('go') } }).body).toMatch(
			/<a class="act" href="\/x"/
		);
		expect(render(Act, { props: { name: 'do', value: 'run', children: text('go') } }).body).toMatch(
			/<button[^>]*type="submit"[^>]*name="do" value="run"/
		);
	});

	it('progress shows how far it is, in words too', () => {
		const { body } = render(Progress, { props: { label: 'R-0208', done: 12, of: 31 } });
		expect(body).toMatch(/<progress[^>]*value="12"[^>]*max="31"/);
		expect(body).toContain('12 of 31');
	});
});
