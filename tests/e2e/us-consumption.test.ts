import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { loadCase, type Case } from '../reference/reference';
import { launch, posted, visit } from '../support/browser';
import { claimsOf, compareReport } from '../support/journey-figures';
import {
	assignValidator,
	confirmVintage,
	declareSigns,
	download,
	registerModel,
	uploadFile,
	type Declaration
} from '../support/journey-model';
import {
	approveProposal,
	enrol,
	grantRole,
	invite,
	linksIn,
	signInWithPasskey,
	signOut,
	type Someone
} from '../support/journey-people';
import { readReport } from '../support/journey-report';
import { awaitReport, runAgain, startRun } from '../support/journey-run';
import { specify, submitVersion } from '../support/journey-version';
import { startServer, type Server } from '../support/server';

/**
 * The main job, on open data and with nothing arranged beforehand: a register that was just started, real passkeys (of
 * Chromium's virtual authenticator), a real file, a real computation. Data: US real consumption, real disposable income
 * and the three-month bill rate, 1959-2009 (FRED, compiled for statsmodels, public domain). Figures: macrodata.json.
 */
const reference: Case = loadCase('macrodata');
const root = resolve(import.meta.dirname, '../..');
const file = resolve(root, 'tests/reference/cases', reference.csv);

let server: Server;
let browser: Browser;
const people: Someone[] = [];
let ada: Someone;
let bo: Someone;
let cleo: Someone;
let dora: Someone;
let emil: Someone;
let model = '';
let vintage = '';
let version = '';
let run = '';

const identity = (name: string, n: number) => ({
	name,
	mail: `${name.split(' ')[0]!.toLowerCase()}@bank.example`,
	staffNumber: String(4000 + n)
});

const declarations: readonly Declaration[] = [
	{ series: 'realdpi', sign: '+', low: '0.5', high: '1.5', why: 'Households spend out of their income.' },
	{ series: 'tbilrate', sign: '-', low: '-0.03', high: '0', why: 'A higher rate rewards saving.' }
];

/** Somebody enrols by an invitation, is given a role (which ends their sessions) and signs in again. */
const join = async (name: string, n: number, role: string, second = false): Promise<Someone> => {
	const { origin } = server;
	const link = await invite(ada.page, origin, identity(name, n));
	const someone = await enrol(browser, link, identity(name, n), true);
	await grantRole(ada.page, origin, name, role);
	if (second) await approveProposal(bo.page, origin, name);
	await signInWithPasskey(someone.page, origin);
	people.push(someone);
	return someone;
};

beforeAll(async () => {
	[server, browser] = await Promise.all([startServer(), launch()]);
});

// Each step stands on the one before: after a fault the rest is skipped.
let broken = false;
beforeEach(({ skip, onTestFailed }) => {
	if (broken) skip();
	onTestFailed(() => {
		broken = true;
	});
});

afterAll(async () => {
	await browser?.close();
	await server?.stop();
	server?.remove();
});

test('two administrators enrol by the links the first start printed', async () => {
	const [one, two] = linksIn(server.output());
	ada = await enrol(browser, one!, identity('Ada Brink', 1));
	bo = await enrol(browser, two!, identity('Bo Castell', 2));
	people.push(ada, bo);
	expect(ada.codes).toHaveLength(10);
	expect(new Set([...ada.codes, ...bo.codes]).size).toBe(20);
	await signOut(ada.page, server.origin);
	await visit(ada.page, `${server.origin}/people`);
	expect(new URL(ada.page.url()).pathname).toBe('/sign-in');
	await signInWithPasskey(ada.page, server.origin);
});

test('an owner, a validator and a head join; the last two need both administrators', async () => {
	cleo = await join('Cleo Dahl', 3, 'owner');
	dora = await join('Dora Ek', 4, 'validator', true);
	emil = await join('Emil Falk', 5, 'head', true);
	await visit(ada.page, `${server.origin}/people`);
	const roles = await ada.page.getByRole('main').getByRole('row').allInnerTexts();
	expect(
		roles.filter((row) => /Cleo Dahl.*owner|Dora Ek.*validator|Emil Falk.*head/s.test(row))
	).toHaveLength(3);
});

test('claims and runs wait for the declared signs', async () => {
	const { page } = cleo;
	model = await registerModel(page, server.origin, {
		name: 'Consumption of US households',
		portfolio: 'Macroeconomic satellite of unsecured lending',
		purpose: 'Projects household consumption from income and the bill rate under the scenarios of the plan.',
		use: 'plan',
		materiality: 4,
		complexity: 2
	});
	const [y, ...drivers] = ['realcons', 'realdpi', 'tbilrate'];
	const specification = {
		schema: 1,
		frequency: 'quarterly',
		series: [y, ...drivers].map((name) => ({ name, column: name, unit: 'log', transform: [] })),
		dependent: y,
		longRun: {
			drivers: drivers.map((series) => ({
				series,
				sign: 'any',
				plausible: [-1, 2],
				rationale: 'not declared'
			})),
			constant: true,
			trend: false
		},
		shortRun: { own: [1], drivers: [], constant: false },
		dummies: [],
		fixed: [],
		sample: { from: '1959-Q1', to: '2009-Q3' },
		estimator: { kind: 'one-step' },
		standardErrors: 'ols'
	};
	const claimed = { source: 'a paper', coefficients: [{ term: 'y.l1', value: '-0.1178' }] };
	const versions = `/api/v1/models/${model}/versions`;
	const early = await posted(page, versions, { specification: { ...specification, claimed }, draft: true });
	expect(early.status).toBe(403);
	expect(String(early.body['detail'])).toContain('Declare the expected sign');
	const drafted = await posted(page, versions, { specification, draft: true });
	expect(drafted.body).toEqual({ ref: `${model}/1` });
	const tooSoon = await posted(page, `/api/v1/models/${model}/runs`, {
		version: `${model}/1`,
		vintage: 'D-0001/1',
		purpose: 'exploratory'
	});
	expect(tooSoon.status).toBe(403);
	expect(String(tooSoon.body['detail'])).toContain('claims and runs come after');
	await visit(page, `${server.origin}/models/${model}/versions/new`);
	expect(await page.getByRole('main').innerText()).toContain('No driver has been declared.');
	// The refused answers stand in the console of the page that asked for them.
	expect(cleo.errors.filter((text) => /403/.test(text))).toHaveLength(2);
});

test('signs first, then the data with their lineage', async () => {
	const { page } = cleo;
	await declareSigns(page, server.origin, model, declarations);
	await uploadFile(page, server.origin, model, file);
	expect(await page.getByRole('main').innerText()).toMatch(
		/203\s+quarterly observations, 1959-Q1 to 2009-Q3/
	);
	vintage = await confirmVintage(page, {
		name: 'US national accounts and rates',
		vintageDate: '2010-01-31',
		source: 'FRED, as compiled for statsmodels',
		columns: {
			realcons: { unit: 'bn 2005 USD', code: 'PCECC96', seasonal: 'adjusted' },
			realdpi: { unit: 'bn 2005 USD', code: 'DPIC96', seasonal: 'adjusted' },
			tbilrate: { unit: 'per cent a year', code: 'TB3MS', seasonal: 'none', notes: 'mean of the quarter' }
		}
	});
	expect(vintage).toBe('D-0001/1');
});

test('the owner specifies term by term, pastes the claims and submits', async () => {
	const { page } = cleo;
	await specify(page, server.origin, model, {
		series: [
			{ name: 'realcons', column: 'realcons', unit: 'log of bn 2005 USD', transform: 'log' },
			{ name: 'realdpi', column: 'realdpi', unit: 'log of bn 2005 USD', transform: 'log' },
			{ name: 'tbilrate', column: 'tbilrate', unit: 'per cent a year', transform: '' }
		],
		from: '1959-Q1',
		to: '2009-Q3',
		own: '1, 2',
		lags: '0-1',
		estimator: 'one-step',
		// As a paper would print them: four decimals, standard errors in brackets.
		claims: claimsOf(reference, 4),
		claimedSource: 'Working paper of 2010-02-14, table 2.',
		reason: 'Logs of the levels, two own lags.'
	});
	// The equation has grown with what was typed, and the pasted table is read as it was meant.
	const equation = await page.getByRole('math').first().getAttribute('aria-label');
	for (const term of ['Δrealcons(t−2)', 'Δrealdpi(t−1)', 'Δtbilrate(t)', 'tbilrate(t−1) ]'])
		expect(equation).toContain(term);
	const read = page.getByRole('region', { name: 'Claimed coefficients as read' }).getByRole('row');
	expect(await read.count()).toBe(11);
	version = await submitVersion(page);
	expect(version).toBe(`${model}/2`);
});

test('a planned run: every figure on the report is the reference figure', async () => {
	const { page } = cleo;
	run = await startRun(page, server.origin, version, 'planned');
	await awaitReport(page);
	const report = await readReport(page);
	expect(compareReport(reference, report)).toBeGreaterThanOrEqual(166);
	expect(report.replication.map((row) => row['replicates'])).toEqual(Array.from({ length: 10 }, () => 'yes'));
	expect(report.checks['replication-coefficients']!.verdict).toBe('holds');
	expect(report.checks['cointegration-engle-granger']!.verdict).toBe('holds');
});

/** Column of a CSV that the report offers, as numbers; empty cells are left out. */
const column = async (page: Page, plot: string, name: string): Promise<number[]> => {
	const answer = await page.request.get(`${server.origin}/runs/${run}/series.csv?plot=${plot}`);
	const [head, ...rows] = (await answer.text())
		.trim()
		.split(/\r?\n/)
		.map((line) => line.split(','));
	const at = head!.indexOf(name);
	return rows
		.map((row) => row[at]!)
		.filter((cell) => cell !== '')
		.map(Number);
};

test('the paths behind the plots are the reference paths; the data come back byte for byte', async () => {
	const { page } = cleo;
	const valuesOf = (id: string, name: string): readonly number[] =>
		reference.checks.find((check) => check.id === id)!.values[name] as number[];
	const paths = [
		[await column(page, 'residuals', 'residual'), valuesOf('ecm1', 'resid')],
		[await column(page, 'cusumsq', 'path'), valuesOf('cusumsq', 'path')]
	] as const;
	for (const [got, expected] of paths) {
		expect(got).toHaveLength(expected.length);
		const apart = Math.max(...expected.map((value, i) => Math.abs(got[i]! - value)));
		expect(apart).toBeLessThan(1e-9);
	}
	const link = page.getByRole('main').locator(`a[href="/data/${vintage}/file"]`).first();
	expect((await download(page, link)).equals(readFileSync(file))).toBe(true);
});

test('another lag rule, with its reason, in an exploratory run that is counted apart', async () => {
	const { page } = cleo;
	await startRun(page, server.origin, version, 'exploratory', [
		{ setting: 'checks/cointegration.engle-granger/rule', value: 'BIC', reason: 'Compare with fewer lags.' }
	]);
	await awaitReport(page);
	const report = await readReport(page);
	expect(report.text).toContain('Compare with fewer lags.');
	expect(report.checks['cointegration-engle-granger']!.further).toEqual(
		expect.arrayContaining(['rule BIC', 'lags 1'])
	);
	// At one lag the case holds Engle-Granger too: statistic, critical value and p-value besides the others.
	expect(compareReport(reference, report)).toBeGreaterThanOrEqual(169);
	await visit(page, `${server.origin}/models/${model}`);
	expect(await page.locator('#runs').innerText()).toContain('1 planned, 1 exploratory');
});

test('the same request again, and the validator, get the same digest', async () => {
	const again = await runAgain(cleo.page, server.origin, run, 'planned');
	expect(await cleo.page.getByRole('main').innerText()).toContain(
		'second of 2 runs of this request, digest equal'
	);
	// A validator reads every model and starts nothing before the head assigns her.
	await visit(dora.page, `${server.origin}/runs/${run}`);
	expect(await dora.page.getByLabel('run it again').count()).toBe(0);
	await assignValidator(emil.page, server.origin, model, 'Dora Ek');
	const validated = await runAgain(dora.page, server.origin, run, 'validation');
	await visit(dora.page, `${server.origin}/runs/compare?a=${run}&b=${validated}`);
	const compared = await dora.page.getByRole('main').innerText();
	expect(compared).toContain(
		'Nothing that a result depends on differs, and the two results have one digest.'
	);
	expect(compared).toContain('No verdict moved.');
	expect(new Set([run, again, validated]).size).toBe(3);
});

test('the folder verifies from the command line with the key that the log page shows', async () => {
	await visit(dora.page, `${server.origin}/log`);
	const key = await dora.page
		.locator('dt', { hasText: 'verifier key' })
		.locator('xpath=following-sibling::dd[1]')
		.innerText();
	await server.stop();
	const verified = spawnSync(process.execPath, ['build/cli.js', 'verify', server.data, '--key', key.trim()], {
		cwd: root,
		encoding: 'utf8'
	});
	// A server that was asked to stop has signed its last entry.
	expect(verified.stdout).not.toContain('not yet under a signed checkpoint');
	expect(verified.status, verified.stdout + verified.stderr).toBe(0);
});

test('no page wrote an error to its console', () => {
	const said = people.flatMap(({ name, errors }) => errors.map((text) => `${name}: ${text}`));
	expect(said.filter((text) => !/status of 403/.test(text))).toEqual([]);
});
