import type { Page } from 'playwright-core';
import { visit } from './browser';

export type PurposeWord = 'planned' | 'validation' | 'exploratory';

/** A line of the policy replaced for one run. */
export interface Replaced {
	/** Its path: `checks/integration.adf/rule`. */
	readonly setting: string;
	readonly value: string;
	readonly reason: string;
}

/** Starts a run from a version's page. @returns its reference, `R-0207` */
export const startRun = async (
	page: Page,
	origin: string,
	version: string,
	purpose: PurposeWord,
	replaced: readonly Replaced[] = []
): Promise<string> => {
	const [model, ordinal] = version.split('/');
	await visit(page, `${origin}/models/${model}/versions/${ordinal}`);
	await page.getByLabel('purpose').selectOption(purpose);
	if (replaced.length > 0) await page.getByText('Replace settings of the policy for this run').click();
	for (const [i, { setting, value, reason }] of replaced.entries()) {
		await page.getByLabel(`setting ${i + 1}`).selectOption(setting);
		await page.getByLabel(`value ${i + 1}`).fill(value);
		await page.getByLabel(`reason ${i + 1}`).fill(reason);
	}
	await page.getByRole('button', { name: 'Start the run' }).click();
	await page.waitForURL(/\/runs\/R-\d+$/);
	return page.url().split('/').at(-1)!;
};

/** Waits on the run's page until it follows by itself to the finished report. */
export const awaitReport = async (page: Page): Promise<void> => {
	await page.getByRole('heading', { name: 'Test results' }).waitFor({ timeout: 60_000 });
};

/** Starts the run of a report once more and waits for the new one. @returns its reference */
export const runAgain = async (
	page: Page,
	origin: string,
	run: string,
	purpose: PurposeWord
): Promise<string> => {
	await visit(page, `${origin}/runs/${run}`);
	await page.getByLabel('run it again').selectOption(purpose);
	await page.getByRole('button', { name: 'Start the run' }).click();
	await page.waitForURL((url) => /\/runs\/R-\d+$/.test(url.pathname) && !url.pathname.endsWith(run));
	await awaitReport(page);
	return page.url().split('/').at(-1)!;
};
