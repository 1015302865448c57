import { resolve } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { loadCase, type Case } from '../reference/reference';
import { launch, watch } from '../support/browser';
import { compareReport } from '../support/journey-figures';
import { confirmVintage, declareSigns, registerModel, uploadFile } from '../support/journey-model';
import { takeSeat } from '../support/journey-people';
import { readReport } from '../support/journey-report';
import { awaitReport, startRun } from '../support/journey-run';
import { specify, submitVersion } from '../support/journey-version';
import { startServer, type Server } from '../support/server';

/**
 * A short sample, told as such: Danish money demand, 55 quarters (Johansen & Juselius 1990, Oxford Bulletin of Economics
 * and Statistics 52, 169-210; as in R's urca). An owner's seat of the demo bank registers it. Figures: denmark.json.
 */
const reference: Case = loadCase('denmark');
const file = resolve(import.meta.dirname, '../reference/cases', reference.csv);

let server: Server;
let browser: Browser;
let page: Page;
let errors: readonly string[];

beforeAll(async () => {
	[server, browser] = await Promise.all([startServer({ demo: true }), launch()]);
	page = await (await browser.newContext()).newPage();
	errors = watch(page);
});
afterAll(async () => {
	await browser?.close();
	await server?.stop();
	server?.remove();
});

const { coef } = reference.checks.find(({ id }) => id === 'ecm1')!.values as Record<
	string,
	Record<string, number>
>;
/** Levels and the change of money, as a table with commas; the paper's other short-run terms are not claimed. */
const claims = [
	`LRM(t-1),${coef!['y.l1']!.toFixed(4)}`,
	`LRY(t-1),${coef!['LRY.l1']!.toFixed(4)}`,
	`IBO(t-1),${coef!['IBO.l1']!.toFixed(4)}`,
	`IDE(t-1),${coef!['IDE.l1']!.toFixed(4)}`,
	`Δ LRM(t-1),${coef!['d.y.l1']!.toFixed(4)}`
].join('\n');

const specification = {
	series: ['LRM', 'LRY', 'IBO', 'IDE'].map((name) => ({ name, column: name, unit: 'log', transform: '' })),
	from: '1974-Q1',
	own: '1',
	lags: '0-1',
	estimator: 'one-step',
	claims,
	claimedSource: 'Reference table, four decimals.',
	reason: ''
} as const;

let model: string;

test('a seat of the demo bank registers Danish money demand and runs it', async () => {
	const { origin } = server;
	await takeSeat(page, origin, /owner/);
	model = await registerModel(page, origin, {
		name: 'Danish money demand',
		portfolio: 'Deposits',
		purpose: 'Projects real money holdings from income and two interest rates.',
		use: 'liquidity plan',
		materiality: 4,
		complexity: 2
	});
	await declareSigns(page, origin, model, [
		{ series: 'LRY', sign: '+', low: '0.5', high: '1.5', why: 'Transactions grow with income.' },
		{ series: 'IBO', sign: '-', low: '-10', high: '0', why: 'Bonds are what money is held instead of.' },
		{ series: 'IDE', sign: '+', low: '0', high: '10', why: 'Deposits pay it.' }
	]);
	await uploadFile(page, origin, model, file);
	const rate = { unit: 'share a year', seasonal: 'none' } as const;
	const vintage = await confirmVintage(page, {
		name: 'Danish money, income and rates',
		vintageDate: '1988-01-31',
		source: 'Johansen & Juselius 1990',
		columns: {
			LRM: { unit: 'log of real M2', code: 'LRM', seasonal: 'adjusted' },
			LRY: { unit: 'log of real income', code: 'LRY', seasonal: 'adjusted' },
			IBO: { ...rate, code: 'IBO' },
			IDE: { ...rate, code: 'IDE' }
		}
	});
	expect(vintage).toMatch(/^D-\d+\/1$/);
	await specify(page, origin, model, { ...specification, to: '1987-Q3' });
	const version = await submitVersion(page);
	await startRun(page, origin, version, 'planned');
	await awaitReport(page);
});

test('its figures are the reference figures, and what 55 quarters cannot show is not assessable', async () => {
	const report = await readReport(page);
	expect(compareReport(reference, report)).toBeGreaterThanOrEqual(192);
	const open = Object.entries(report.checks).filter(([, { verdict }]) => verdict === 'not assessable');
	expect(Object.fromEntries(open.map(([id, { sentence }]) => [id, sentence]))).toEqual({
		'residual-stationarity-held': 'Not assessable: There is no approved version whose values could be held.',
		'stability-sup-f': 'Not assessable: 9 coefficients on 53 rows leave less room than the trim asks for.'
	});
	// What is judged by a bootstrap in a sample this short shows the table's p-value beside it.
	expect(report.checks['cointegration-engle-granger']!.further).toContain('judged by bootstrap iid');
	expect(report.checks['design-degrees']!.verdict).toBe('fails');
	expect(report.replication.map((row) => row['replicates'])).toEqual(Array.from({ length: 5 }, () => 'yes'));
});

test('on its first six years most of the battery is not assessable, and says why', async () => {
	const { origin } = server;
	await specify(page, origin, model, {
		...specification,
		to: '1979-Q4',
		reason: 'What the first six years alone would have shown.'
	});
	const version = await submitVersion(page);
	await startRun(page, origin, version, 'exploratory');
	await awaitReport(page);
	const { checks } = await readReport(page);
	const silent = Object.entries(checks).filter(([, { verdict }]) => verdict === 'not assessable');
	expect(silent.map(([id]) => id)).toEqual(
		expect.arrayContaining([
			'integration-order',
			'residual-stationarity-refit',
			'residual-arch',
			'residual-normality',
			'residual-heteroskedasticity',
			'residual-functional-form',
			'long-run-precision',
			'stability-cusum',
			'stability-cusumsq',
			'stability-sup-f'
		])
	);
	for (const [, { sentence }] of silent) expect(sentence).toMatch(/^Not assessable: .{20,}/);
});

test('no page wrote an error to its console', () => expect(errors).toEqual([]));
