import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';

const debian = '/usr/bin/chromium';

/** Debian's Chromium, else the one inside an npm package. */
export const launch = async (): Promise<Browser> => {
	// Root needs the flag; nothing else is loosened.
	const args = [
		'--no-sandbox',
		'--disable-background-networking',
		'--disable-component-update',
		'--no-first-run'
	];
	if (existsSync(debian)) return chromium.launch({ executablePath: debian, args });
	process.env['AWS_EXECUTION_ENV'] ??= 'AWS_Lambda_nodejs20.x';
	const { default: packaged } = await import('@sparticuz/chromium');
	return chromium.launch({ executablePath: await packaged.executablePath(), args });
};

/** Errors a page wrote to its console, and errors it threw. */
export const watch = (page: Page): string[] => {
	const errors: string[] = [];
	page.on('console', (message) => message.type() === 'error' && errors.push(message.text()));
	page.on('pageerror', (error) => errors.push(String(error)));
	return errors;
};

/** Gives the page a platform authenticator with resident keys and user verification. */
export const withAuthenticator = async (context: BrowserContext, page: Page): Promise<void> => {
	const cdp = await context.newCDPSession(page);
	await cdp.send('WebAuthn.enable');
	await cdp.send('WebAuthn.addVirtualAuthenticator', {
		options: {
			protocol: 'ctap2',
			transport: 'internal',
			hasResidentKey: true,
			hasUserVerification: true,
			isUserVerified: true,
			automaticPresenceSimulation: true
		}
	});
};

/** Waits until the page's own scripts run: SvelteKit puts its route announcer in once it has mounted. */
export const alive = async (page: Page): Promise<void> => {
	await page.locator('#svelte-announcer').waitFor({ state: 'attached' });
};

/** Opens a page and waits for its scripts; the status it was answered with. */
export const visit = async (page: Page, address: string): Promise<number> => {
	const answer = await page.goto(address);
	await alive(page);
	return answer?.status() ?? 0;
};

const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/** Serious and critical faults that axe finds on the page as it stands: `rule: where`. */
export const inaccessible = async (page: Page): Promise<string[]> => {
	// Evaluated, not added as a script tag: the page's policy stays in force.
	await page.evaluate(axe);
	return page.evaluate(async () => {
		interface Found {
			readonly id: string;
			readonly impact: string;
			readonly nodes: readonly { readonly target: readonly string[] }[];
		}
		const { run } = (globalThis as unknown as { axe: { run: () => Promise<{ violations: Found[] }> } }).axe;
		const { violations } = await run();
		return violations
			.filter(({ impact }) => impact === 'serious' || impact === 'critical')
			.flatMap(({ id, nodes }) => nodes.map(({ target }) => `${id}: ${target.join(' ')}`));
	});
};

/** By how many pixels the page is wider than its window. */
export const overflow = (page: Page): Promise<number> =>
	page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);

/** Answer of the API to a same-origin request from the page, with the session of whoever is signed in there. */
export const posted = (
	page: Page,
	path: string,
	body: object
): Promise<{ status: number; body: Record<string, unknown> }> =>
	page.evaluate(
		async ([to, sent]) => {
			const answer = await fetch(to!, {
				method: 'POST',
				headers: { 'content-type': 'application/json' },
				body: sent!
			});
			return { status: answer.status, body: (await answer.json()) as Record<string, unknown> };
		},
		[path, JSON.stringify(body)]
	);
