// Starts the built server: settings first, then every start-up check, and only then a listening socket.
import { createServer } from 'node:http';

const env = process.env;
env.HOST ??= '127.0.0.1';
env.PORT ??= '4173';
env.KEELBOOK_ORIGIN ??= `http://localhost:${env.PORT}`;
// The handler's own settings follow ours; uploads are bounded by the application, with a sentence.
env.ORIGIN = env.KEELBOOK_ORIGIN;
env.BODY_SIZE_LIMIT ??= String(27 * 1024 * 1024);

/** @typedef {Error & { exitCode?: number }} Fault */

/** @param {unknown} fault */
const stop = (fault) => {
	const { message, exitCode = 70, stack } = /** @type {Fault} */ (fault);
	process.stderr.write(`${exitCode === 70 ? (stack ?? message) : message}\n`);
	process.exit(exitCode);
};

// Not a literal: the build is no source to be type-checked.
const built = new URL('../build/handler.js', import.meta.url).href;
const { handler } = await import(built).catch(stop);

// Every answer carries these, also those that the application's own code never sees: static files, redirects, what is
// refused before its hooks. Where the application says otherwise (a page's own policy), its word stands.
/** @type {Readonly<Record<string, string>>} */
const common = {
	'content-security-policy': "default-src 'none'; frame-ancestors 'none'; base-uri 'none'",
	'x-content-type-options': 'nosniff',
	'referrer-policy': 'same-origin',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin',
	'permissions-policy':
		'publickey-credentials-get=(self), publickey-credentials-create=(self), camera=(), microphone=(), geolocation=(), payment=(), usb=()',
	...(env.ORIGIN.startsWith('https:')
		? { 'strict-transport-security': 'max-age=63072000; includeSubDomains' }
		: {})
};
const kept = 'public,max-age=31536000,immutable';

const server = createServer(
	{ headersTimeout: 10_000, requestTimeout: 120_000, keepAliveTimeout: 5_000, maxHeaderSize: 16 * 1024 },
	(request, response) => {
		for (const [name, value] of Object.entries(common)) response.setHeader(name, value);
		// Files named by their content never change; everything else is asked for anew.
		const named = request.url?.startsWith('/_app/immutable/');
		response.setHeader('cache-control', named ? kept : 'no-store');
		handler(request, response, () => {
			response.statusCode = 404;
			response.end('There is no such page.');
		});
	}
);

server.on('error', (fault) => {
	const inUse = /** @type {NodeJS.ErrnoException} */ (fault).code === 'EADDRINUSE';
	stop(
		inUse
			? Object.assign(new Error(`Port ${env.PORT} is in use; set PORT to a free one.`), { exitCode: 75 })
			: fault
	);
});

server.listen(Number(env.PORT), env.HOST, () => {
	process.stdout.write(`Keelbook answers at ${env.KEELBOOK_ORIGIN}\n`);
	process.emit(/** @type {'SIGUSR2'} */ (/** @type {unknown} */ ('keelbook:listening')), 'SIGUSR2');
});

/** Finish what is being answered, close the register (its last checkpoint is signed), leave. */
const leave = () => {
	const closed = new Promise((done) => process.once('keelbook:closed', done));
	server.close(() => void closed.then(() => process.exit(0)));
	server.closeIdleConnections();
	process.emit(/** @type {'SIGUSR2'} */ (/** @type {unknown} */ ('sveltekit:shutdown')), 'SIGUSR2');
	setTimeout(() => process.exit(0), 10_000).unref();
};
process.once('SIGTERM', leave);
process.once('SIGINT', leave);
