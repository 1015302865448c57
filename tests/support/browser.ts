import { existsSync } from 'node:fs';
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
