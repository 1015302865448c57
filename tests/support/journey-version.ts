import type { Page } from 'playwright-core';
import { visit } from './browser';

export interface SeriesWords {
	readonly name: string;
	readonly column: string;
	readonly unit: string;
	/** As typed: `log`, `scale(100), log`. */
	readonly transform: string;
}

export interface SpecificationWords {
	/** The dependent variable first, then the drivers in the order they were declared. */
	readonly series: readonly SeriesWords[];
	readonly from: string;
	readonly to: string;
	readonly own: string;
	/** Lags of every driver's differences: `0-1`. */
	readonly lags: string;
	readonly estimator: 'one-step' | 'two-step';
	readonly claims: string;
	readonly claimedSource: string;
	/** Why the model gets this version. */
	readonly reason: string;
}

/** Names the driver of a row, which is added first where the form does not offer it yet. */
const chooseDriver = async (
	page: Page,
	run: 'long run' | 'short run',
	row: number,
	series: string
): Promise<void> => {
	const choice = page
		.getByRole('region', { name: `Drivers of the ${run}` })
		.getByLabel(`row ${row}`)
		.first();
	if (!(await choice.isVisible())) {
		await page.getByRole('button', { name: `Add a driver of the ${run}` }).click();
		await choice.waitFor();
	}
	await choice.selectOption(series);
};

/** Opens the form of a version and types the specification term by term; the form follows with the equation. */
export const specify = async (
	page: Page,
	origin: string,
	model: string,
	words: SpecificationWords
): Promise<void> => {
	await visit(page, `${origin}/models/${model}/versions/new`);
	const table = (name: string) => page.getByRole('region', { name, exact: true });
	for (const [i, { name, column, unit, transform }] of words.series.entries()) {
		const cell = (label: string) => table('Series of the model').getByLabel(`${label}, row ${i + 1}`);
		await cell('name').fill(name);
		await cell('column of the data').fill(column);
		await cell('unit').fill(unit);
		await cell('transforms, in order').fill(transform);
	}
	await page.getByLabel('dependent variable').selectOption(words.series[0]!.name);
	await page.getByLabel('sample from').fill(words.from);
	await page.getByLabel('to', { exact: true }).fill(words.to);
	await page.getByLabel('own lags of').fill(words.own);
	const drivers = words.series.slice(1);
	for (const [i, { name }] of drivers.entries()) {
		await chooseDriver(page, 'long run', i + 1, name);
		await chooseDriver(page, 'short run', i + 1, name);
		await table('Drivers of the short run')
			.getByLabel(`lags, row ${i + 1}`)
			.fill(words.lags);
	}
	await page.getByLabel('estimator').selectOption(words.estimator);
	await page.getByLabel('paste a table').fill(words.claims);
	await page.getByLabel('where they stand').fill(words.claimedSource);
	await page.getByLabel(/^(why this version|remark)/).fill(words.reason);
};

/** Submits what stands in the form of a version. @returns its reference, `M-014/3` */
export const submitVersion = async (page: Page): Promise<string> => {
	await page.getByRole('button', { name: /^Submit: nothing can change after/ }).click();
	await page.waitForURL(/\/models\/M-\d+\/versions\/\d+$/);
	const [model, , ordinal] = page.url().split('/').slice(-3);
	return `${model}/${ordinal}`;
};
