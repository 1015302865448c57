import { resolve } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { alive, inaccessible, launch, watch } from '../support/browser';
import { uploadFile } from '../support/journey-model';
import { faultsOn, look, longCaution, walk } from '../support/journey-pages';
import { takeSeat } from '../support/journey-people';
import { startServer, type Server } from '../support/server';

/**
 * Every page of the demo bank, as each role is led to it by the links it is shown: answered with 200, no error in the
 * console, nothing serious or critical for axe, no wider than a telephone, with its caution. And without JavaScript.
 */
const file = resolve(import.meta.dirname, '../reference/cases/denmark.csv');

let server: Server;
let browser: Browser;

beforeAll(async () => {
	[server, browser] = await Promise.all([startServer({ demo: true }), launch()]);
});
afterAll(async () => {
	await browser?.close();
	await server?.stop();
	server?.remove();
});

const newPage = async (javaScriptEnabled = true): Promise<Page> => {
	const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, javaScriptEnabled });
	context.setDefaultTimeout(20_000);
	return context.newPage();
};

const seated = async (role: RegExp): Promise<{ page: Page; errors: readonly string[] }> => {
	const page = await newPage();
	const errors = watch(page);
	await takeSeat(page, server.origin, role);
	return { page, errors };
};

const address = (path: string): URL => new URL(path, server.origin);

test('the door', async () => {
	const page = await newPage();
	const errors = watch(page);
	for (const path of ['/sign-in', '/enrol', '/recovery']) expect(await look(page, address(path))).toEqual([]);
	expect(errors).toEqual([]);
	await page.context().close();
});

const everywhere = ['/', '/models', '/runs', '/data', '/policy', '/account'];
const evidence = [
	'/models/ref',
	'/models/ref/signs',
	'/models/ref/data',
	'/models/ref/versions/n',
	'/models/ref/versions/n/specification.json',
	'/runs/ref',
	'/runs/ref/result.json',
	'/runs/ref/series.csv?plot',
	'/data/ref',
	'/data/ref/n',
	'/data/ref/n/file',
	'/log',
	'/log/n'
];
/** What each role must at least be led to; the validator sees the report of each of the five models. */
const roles: readonly (readonly [role: string, seat: RegExp, kinds: readonly string[]])[] = [
	[
		'owner',
		/owner/,
		[...evidence, '/models/new', '/models/ref/versions/new', '/models/ref/versions/new?revise']
	],
	['validator', /validator/, [...evidence, '/people', '/people/person', '/log/n/entry.json']],
	['head', /head of model risk/, [...evidence, '/people', '/people/person', '/policy/adopt?release']],
	['auditor', /auditor/, [...evidence, '/people', '/people/person']],
	['administrator', /administrator/, ['/models/ref', '/people', '/people/person']]
];

describe.each(roles)('as %s', (role, seat, kinds) => {
	test('every page that the links lead to', async () => {
		const { page, errors } = await seated(seat);
		const starts = everywhere.map(address);
		const most = role === 'validator' ? 5 : 1;
		const walked = await walk(page, starts, (kind) => (/^\/(models|runs)\/ref$/.test(kind) ? most : 1));
		expect(walked.faults).toEqual([]);
		expect(errors).toEqual([]);
		for (const kind of kinds) expect(walked.kinds, role).toContain(kind);
		await page.context().close();
	});
});

test('a file that was looked at, and two runs side by side', async () => {
	const { page, errors } = await seated(/owner/);
	await page.goto(`${server.origin}/models`);
	const model = await page.locator('main a[href^="/models/M-"]').first().innerText();
	await uploadFile(page, server.origin, model, file);
	expect(await faultsOn(page)).toEqual([]);
	await page.goto(`${server.origin}/runs`);
	const runs = await page.locator('main a[href^="/runs/R-"]').allInnerTexts();
	const [a, b] = [...new Set(runs)];
	expect(await look(page, address(`/runs/compare?a=${a}&b=${b}`))).toEqual([]);
	expect(await look(page, address('/runs/compare'))).toEqual([]);
	expect(errors).toEqual([]);
	await page.context().close();
});

test('what is not there, and what a role may not see, says so in the house format', async () => {
	const { page } = await seated(/administrator/);
	for (const [path, status] of [
		['/models/M-9999', 404],
		['/nothing-here', 404],
		['/log', 403]
	] as const) {
		expect((await page.goto(`${server.origin}${path}`))?.status(), path).toBe(status);
		await alive(page);
		expect(await page.getByRole('heading', { level: 1 }).count(), path).toBe(1);
		expect(await inaccessible(page), path).toEqual([]);
	}
	await page.context().close();
});

test('a report, the register and the log in the dark', async () => {
	const { page, errors } = await seated(/validator/);
	await page.emulateMedia({ colorScheme: 'dark' });
	await page.goto(`${server.origin}/runs`);
	const run = await page.locator('main a[href^="/runs/R-"]').first().getAttribute('href');
	for (const path of [run!, '/models', '/log']) {
		await page.goto(`${server.origin}${path}`);
		await alive(page);
		expect(await inaccessible(page), path).toEqual([]);
	}
	expect(errors).toEqual([]);
	await page.context().close();
});

test('without JavaScript: reading, and registering a model', async () => {
	const page = await newPage(false);
	const main = page.getByRole('main');
	await page.goto(`${server.origin}/sign-in`);
	expect(await page.locator('body').innerText()).toContain(longCaution);
	await page
		.getByRole('row')
		.filter({ hasText: 'owner' })
		.getByRole('button', { name: /^Take/ })
		.first()
		.click();
	await page.getByRole('heading', { name: 'Desk', level: 1 }).waitFor();
	await page.goto(`${server.origin}/models`);
	expect(await main.getByRole('row').count()).toBeGreaterThanOrEqual(6);
	await main.locator('a[href^="/models/M-"]').first().click();
	expect(await main.getByRole('math').first().getAttribute('aria-label')).toContain('Δ');
	await main.getByRole('link', { name: 'the whole report' }).click();
	expect(await main.innerText()).toContain('Test results');
	expect(await page.locator('tr.reading').count()).toBeGreaterThan(20);
	expect(await page.locator('main svg').count()).toBeGreaterThan(4);

	await page.goto(`${server.origin}/models/new`);
	const statuses: number[] = [];
	page.on('response', (answer) => {
		if (answer.request().method() === 'POST') statuses.push(answer.status());
	});
	await page.getByRole('textbox', { name: 'name' }).fill('Deposits of small firms');
	await page.getByRole('button', { name: 'Register the model' }).click();
	// What was wrong is said, what was typed is kept.
	await page.getByRole('alert').waitFor();
	expect(await page.getByRole('textbox', { name: 'name' }).inputValue()).toBe('Deposits of small firms');
	await page.getByRole('textbox', { name: 'portfolio' }).fill('Deposits');
	await page
		.getByRole('textbox', { name: 'purpose' })
		.fill('Projects the deposits of small firms for the plan.');
	await page.getByRole('checkbox', { name: 'plan', exact: true }).check();
	await page.locator('input[name=materiality][value="2"]').check();
	await page.locator('input[name=complexity][value="2"]').check();
	await page.getByRole('button', { name: 'Register the model' }).click();
	await page.waitForURL(/\/models\/M-\d+$/);
	expect(await page.getByRole('heading', { level: 1 }).innerText()).toBe('Deposits of small firms');
	expect(statuses).toEqual([400, 303]);
	await page.context().close();
});
