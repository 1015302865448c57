import type { Browser, BrowserContext, Page } from 'playwright-core';
import { alive, visit, watch, withAuthenticator } from './browser';

/** Somebody at a browser of their own, whose passkey lives in it. */
export interface Someone {
	readonly name: string;
	readonly mail: string;
	readonly context: BrowserContext;
	readonly page: Page;
	/** What went wrong on the pages they saw. */
	readonly errors: readonly string[];
	/** Recovery codes as shown once, after enrolment. */
	readonly codes: readonly string[];
}

export interface Identity {
	readonly name: string;
	readonly mail: string;
	readonly staffNumber: string;
}

const password = 'a tide gauge in the rain';

/** Enrolment links that a fresh register printed at its start. */
export const linksIn = (output: string): string[] => output.match(/http:\/\/\S+\/enrol#\S+/g) ?? [];

/** Opens the one-time link in a new browser context with an authenticator, makes a passkey, reads the codes. */
export const enrol = async (
	browser: Browser,
	link: string,
	who: Identity,
	invited = false
): Promise<Someone> => {
	const context = await browser.newContext();
	const page = await context.newPage();
	const errors = watch(page);
	await withAuthenticator(context, page);
	await page.goto(link);
	const make = page.getByRole('button', { name: 'Make a passkey and enrol' });
	await make.waitFor();
	await alive(page);
	if (!invited) {
		await page.getByLabel('Your name').fill(who.name);
		await page.getByLabel('Mail address').fill(who.mail);
		await page.getByLabel('Staff number').fill(who.staffNumber);
	}
	await page.getByLabel('Password for recovery').fill(password);
	await make.click();
	await page.getByRole('heading', { name: 'Keep these recovery codes' }).waitFor();
	const codes = await page.getByRole('main').getByRole('listitem').allInnerTexts();
	await page.getByRole('link', { name: 'I keep them: to the desk' }).click();
	await page.getByRole('heading', { name: 'Desk', level: 1 }).waitFor();
	return { name: who.name, mail: who.mail, context, page, errors, codes };
};

export const signOut = async (page: Page, origin: string): Promise<void> => {
	await visit(page, `${origin}/account`);
	await page.getByRole('button', { name: 'Sign out' }).click();
	await page.waitForURL('**/sign-in*');
};

export const signInWithPasskey = async (page: Page, origin: string): Promise<void> => {
	await visit(page, `${origin}/sign-in`);
	await page.getByRole('button', { name: 'Sign in with a passkey' }).click();
	await page.getByRole('heading', { name: 'Desk', level: 1 }).waitFor();
};

/** Takes a seat of the demo bank: `Mora Lindqvist`, or a part of the line that names its role. */
export const takeSeat = async (page: Page, origin: string, seat: RegExp): Promise<void> => {
	await visit(page, `${origin}/sign-in`);
	await page
		.getByRole('row')
		.filter({ hasText: seat })
		.getByRole('button', { name: /^Take (this seat|the seat of)/ })
		.first()
		.click();
	await page.getByRole('heading', { name: 'Desk', level: 1 }).waitFor();
};

/** Signs the statement that stands on the page, and waits until it is gone. */
export const signStatement = async (page: Page): Promise<void> => {
	const statement = page.getByRole('region', { name: 'Read and sign' });
	await statement.waitFor();
	await alive(page);
	await statement.getByRole('button', { name: /^Sign (with a passkey|as this seat)$/ }).click();
	await statement.waitFor({ state: 'detached' });
};

/** An admin invites somebody; the link to hand over. */
export const invite = async (page: Page, origin: string, who: Identity): Promise<string> => {
	await visit(page, `${origin}/people`);
	await page.getByRole('textbox', { name: 'Name' }).fill(who.name);
	await page.getByRole('textbox', { name: 'Mail address' }).fill(who.mail);
	await page.getByRole('textbox', { name: 'Staff number' }).fill(who.staffNumber);
	await page.getByRole('button', { name: 'Read and sign' }).click();
	await signStatement(page);
	return page.locator('code').filter({ hasText: '/enrol#' }).innerText();
};

/** An admin signs the grant of a role: in force at once, or proposed where two administrators are needed. */
export const grantRole = async (page: Page, origin: string, name: string, role: string): Promise<void> => {
	await visit(page, `${origin}/people`);
	await page.getByRole('link', { name, exact: true }).click();
	await page.getByRole('heading', { name, level: 1 }).waitFor();
	await page.getByLabel('Role').selectOption(role);
	await page.getByRole('button', { name: 'Read and sign the grant' }).click();
	await signStatement(page);
};

/** A second admin signs the one proposal about this person. */
export const approveProposal = async (page: Page, origin: string, name: string): Promise<void> => {
	await visit(page, `${origin}/people`);
	const proposal = page
		.getByRole('region', { name: 'Proposals that wait for a second administrator' })
		.locator('div')
		.filter({ hasText: name })
		.filter({ has: page.getByRole('button', { name: 'Read and approve' }) })
		.last();
	await proposal.getByRole('button', { name: 'Read and approve' }).click();
	await signStatement(page);
};
