import type { Config } from '$lib/server/config';

/** A cookie as routes set it: no expiry (it ends with the browser), no domain, no script. */
export interface CookieForm {
	readonly name: string;
	readonly options: {
		readonly path: '/';
		readonly httpOnly: true;
		readonly secure: boolean;
		readonly sameSite: 'lax';
		readonly maxAge?: number;
	};
}

const loopback = new Set(['localhost', '127.0.0.1', '[::1]']);

/** Whether the register answers on this machine only. */
export const onLoopback = (config: Config): boolean => loopback.has(new URL(config.origin).hostname);

const form = (config: Config, secure: string, local: string, maxAge?: number): CookieForm => {
	const https = config.origin.startsWith('https:');
	return Object.freeze({
		// The __Host- prefix binds the cookie to this very host, and needs Secure.
		name: https ? secure : local,
		options: Object.freeze({
			path: '/',
			httpOnly: true,
			secure: https,
			sameSite: 'lax',
			...(maxAge === undefined ? {} : { maxAge })
		})
	});
};

/** The session's cookie. */
export const sessionCookie = (config: Config): CookieForm =>
	form(config, '__Host-keelbook', 'keelbook-local');

/** Binds a challenge to the browser that asked for it, before anybody is signed in; five minutes. */
export const doorCookie = (config: Config): CookieForm =>
	form(config, '__Host-keelbook-door', 'keelbook-door-local', 300);
