import { readFile } from 'node:fs/promises';
import type { Locator, Page } from 'playwright-core';
import { alive, visit } from './browser';

/** What an owner says of a model when registering it. */
export interface ModelWords {
	readonly name: string;
	readonly portfolio: string;
	readonly purpose: string;
	readonly use: string;
	/** Beginning of the answer's label: `2 ·`. */
	readonly materiality: number;
	readonly complexity: number;
}

/** Registers a model on its page. @returns its reference, `M-014` */
export const registerModel = async (page: Page, origin: string, model: ModelWords): Promise<string> => {
	await visit(page, `${origin}/models/new`);
	await page.getByRole('textbox', { name: 'name' }).fill(model.name);
	await page.getByRole('textbox', { name: 'portfolio' }).fill(model.portfolio);
	await page.getByRole('textbox', { name: 'purpose' }).fill(model.purpose);
	await page.getByRole('checkbox', { name: model.use, exact: true }).check();
	await page.locator(`input[name=materiality][value="${model.materiality}"]`).check();
	await page.locator(`input[name=complexity][value="${model.complexity}"]`).check();
	await page.getByRole('button', { name: 'Register the model' }).click();
	await page.waitForURL(/\/models\/M-\d+$/);
	return page.url().split('/').at(-1)!;
};

/** The head of model risk assigns a validator on the model's sheet. */
export const assignValidator = async (
	page: Page,
	origin: string,
	model: string,
	name: string
): Promise<void> => {
	await visit(page, `${origin}/models/${model}`);
	await page.getByLabel('validator', { exact: true }).selectOption({ label: name });
	await page.getByRole('button', { name: 'Assign', exact: true }).click();
	await page
		.getByRole('region', { name: 'People of the model' })
		.getByRole('row', { name: new RegExp(`${name}.*validator`) })
		.waitFor();
};

export interface Declaration {
	readonly series: string;
	readonly sign: '+' | '-' | 'any';
	readonly low: string;
	readonly high: string;
	readonly why: string;
}

/** Declares signs and plausible ranges, one row a driver. */
export const declareSigns = async (
	page: Page,
	origin: string,
	model: string,
	drivers: readonly Declaration[]
): Promise<void> => {
	await visit(page, `${origin}/models/${model}/signs`);
	for (const [i, { series, sign, low, high, why }] of drivers.entries()) {
		const row = i + 1;
		if (i > 0) await page.getByRole('button', { name: 'Add a driver' }).click();
		await page.getByLabel(`driver, row ${row}`).fill(series);
		await page.getByLabel(`sign, row ${row}`).selectOption(sign);
		await page.getByLabel(`from, row ${row}`, { exact: true }).fill(low);
		await page.getByLabel(`to, row ${row}`, { exact: true }).fill(high);
		await page.getByLabel(`why, row ${row}`).fill(why);
	}
	await page.getByRole('button', { name: 'Declare', exact: true }).click();
	await page.getByRole('region', { name: 'Declarations of signs' }).waitFor();
};

/** Where one column of a file comes from; a column not named is left out. */
export interface ColumnLineage {
	readonly unit: string;
	readonly code: string;
	readonly seasonal: 'none' | 'adjusted' | 'unadjusted' | 'unknown';
	readonly notes?: string;
}

export interface VintageWords {
	readonly name: string;
	readonly vintageDate: string;
	readonly source: string;
	readonly columns: Readonly<Record<string, ColumnLineage>>;
}

/** Chooses a file and looks at how it reads: nothing is stored yet. */
export const uploadFile = async (page: Page, origin: string, model: string, file: string): Promise<void> => {
	await visit(page, `${origin}/models/${model}/data`);
	await page.getByLabel('file', { exact: true }).setInputFiles(file);
	await page.getByRole('button', { name: 'Look at it' }).click();
	await page.waitForURL(/\/data\/preview\?/);
	await alive(page);
};

const columnRow = (page: Page, column: string): Locator =>
	page
		.getByRole('region', { name: 'Lineage of the columns' })
		.getByRole('row')
		.filter({ has: page.getByLabel(`use of ${column}`, { exact: true }) });

/** Says where every column of the previewed file comes from and stores it. @returns the vintage, `D-0001/1` */
export const confirmVintage = async (page: Page, vintage: VintageWords): Promise<string> => {
	await page.getByLabel('name of the dataset').fill(vintage.name);
	await page.getByRole('textbox', { name: 'vintage date', exact: true }).fill(vintage.vintageDate);
	await page.getByRole('textbox', { name: /^provider(?! of)/ }).fill(vintage.source);
	const columns = await page.locator('input[name^="columns."][name$=".column"]').all();
	for (const hidden of columns) {
		const column = await hidden.inputValue();
		const said = vintage.columns[column];
		const row = columnRow(page, column);
		await row.getByLabel(`use of ${column}`, { exact: true }).selectOption(said ? 'observed' : 'left-out');
		if (!said) continue;
		await row.getByLabel(`unit of ${column}`, { exact: true }).fill(said.unit);
		await row.getByLabel(`series code of ${column}`, { exact: true }).fill(said.code);
		await row.getByLabel(`seasonal adjustment of ${column}`, { exact: true }).selectOption(said.seasonal);
		if (said.notes) await row.getByLabel(`notes of ${column}`, { exact: true }).fill(said.notes);
	}
	await page.getByRole('button', { name: 'Store the vintage' }).click();
	await page.waitForURL(/\/data\/D-\d+\/\d+$/);
	return page.url().split('/').slice(-2).join('/');
};

/** The bytes a link downloads. */
export const download = async (page: Page, link: Locator): Promise<Buffer> => {
	const [file] = await Promise.all([page.waitForEvent('download'), link.click()]);
	return readFile(await file.path());
};
