import { readdirSync } from 'node:fs';
import { resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ask, type Answer, type Asked } from './ask';
import { openBank, type Bank } from './bank';
import { casesOf } from './cases';
import { groupOf } from './expected';
import { table } from './table';

let bank: Bank;

beforeAll(async () => {
	bank = await openBank();
});
afterAll(() => bank.close());

/** What every answer carries. */
const common = {
	'x-content-type-options': 'nosniff',
	'referrer-policy': 'same-origin',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin',
	'permissions-policy':
		'publickey-credentials-get=(self), publickey-credentials-create=(self), camera=(), microphone=(), geolocation=(), payment=(), usb=()'
};

const noStore = /^(private, )?no-store$/;
const forever = /^public, ?max-age=31536000, ?immutable$/;

const pagePolicy = [
	"default-src 'none'",
	"img-src 'self'",
	"font-src 'self'",
	"connect-src 'self'",
	"form-action 'self'",
	"base-uri 'none'",
	"frame-ancestors 'none'"
];

const inline = /<script(?![^>]*(?:\bsrc=|type="application\/json"))[^>]*>/g;

/** A page may run its own scripts by nonce, and nothing else; what is no page of ours may load nothing. */
const policyFaults = ({ headers, text }: Answer): string[] => {
	const policy = String(headers['content-security-policy']);
	const parts = policy.split('; ');
	const scripts = text.startsWith('<!doctype html>') ? (text.match(inline) ?? []) : [];
	const faults = /unsafe-inline|unsafe-eval|data:|\*/.test(policy) ? [`loose: ${policy}`] : [];
	if (/<style|\sstyle="(?!position: absolute; left: 0; top: 0; clip)/.test(text))
		faults.push('an inline style');
	if (scripts.length === 0)
		return parts.includes("default-src 'none'") ? faults : [...faults, `policy of data: ${policy}`];
	faults.push(...pagePolicy.filter((part) => !parts.includes(part)));
	const allowed = parts.find((part) => part.startsWith('script-src'));
	const nonce = /^script-src 'self' 'nonce-([A-Za-z0-9+/=]{16,})'$/.exec(allowed ?? '')?.[1];
	if (nonce === undefined) faults.push(`scripts: ${allowed}`);
	if (scripts.some((tag) => !tag.includes(`nonce="${nonce}"`))) faults.push('a script without the nonce');
	return faults;
};

const faultsOf = (answer: Answer, cache = noStore): string[] => {
	const { headers } = answer;
	const faults = Object.entries(common)
		.filter(([name, value]) => headers[name] !== value)
		.map(([name]) => `${name}: ${headers[name]}`);
	if (!cache.test(String(headers['cache-control']))) faults.push(`cached: ${headers['cache-control']}`);
	for (const name of ['server', 'x-powered-by', 'access-control-allow-origin'])
		if (headers[name] !== undefined) faults.push(`${name} is sent`);
	return [...faults, ...policyFaults(answer)];
};

const signedIn = (asked: Asked, who: 'owner' | 'auditor' = 'owner'): Asked => ({
	...asked,
	headers: {
		accept: asked.path.startsWith('/api/') ? '*/*' : 'text/html',
		origin: bank.origin,
		cookie: `keelbook-local=${bank.sessions[who]}`,
		...asked.headers
	}
});

describe('the headers of every answer', () => {
	for (const row of table)
		if (row.route !== '/(door)/sign-out')
			it([row.method, row.route, row.what].filter(Boolean).join(' · '), async () => {
				const wrong: string[] = [];
				for (const { reference, asked } of casesOf(row, bank)) {
					const signed = await ask(bank.origin, signedIn(asked));
					const closed = await ask(bank.origin, {
						...asked,
						headers: { ...asked.headers, origin: bank.origin }
					});
					for (const answer of [signed, closed])
						wrong.push(...faultsOf(answer).map((fault) => `${reference}, ${answer.status}: ${fault}`));
				}
				expect(wrong, wrong.join('\n')).toEqual([]);
			});

	it('stand on the nonce of one answer only', async () => {
		const policy = async (): Promise<unknown> =>
			(await ask(bank.origin, { path: '/sign-in', headers: { accept: 'text/html' } })).headers[
				'content-security-policy'
			];
		expect(await policy()).not.toBe(await policy());
	});

	it('stand on what no route answers', async () => {
		const beside: Asked[] = [
			{ path: '/nowhere' },
			{ path: '/api/v1/nowhere' },
			{ path: '/_app/immutable/nowhere.js' },
			{ path: '/%' },
			{ path: '/models/%00' },
			{ path: '/models/' },
			{ path: '/sign-in', method: 'PUT', headers: { origin: bank.origin } },
			{ path: '/api/v1/models', method: 'DELETE', headers: { origin: bank.origin } },
			{ path: '/sign-in', method: 'OPTIONS' },
			{ path: '/sign-in', method: 'HEAD' },
			{ path: '/sign-in', method: 'TRACE' },
			{
				path: '/sign-in?/passkey',
				method: 'POST',
				headers: { origin: 'https://other.example', 'content-type': 'application/x-www-form-urlencoded' },
				body: 'response=1'
			}
		];
		const wrong: string[] = [];
		for (const asked of beside) {
			const answer = await ask(bank.origin, asked);
			const about = `${asked.method ?? 'GET'} ${asked.path}, ${answer.status}`;
			// SvelteKit keeps the absence of a named file for no time, in words of its own.
			const cache = asked.path.startsWith('/_app/immutable/') ? /max-age=0, must-revalidate/ : noStore;
			wrong.push(...faultsOf(answer, cache).map((fault) => `${about}: ${fault}`));
		}
		expect(wrong, wrong.join('\n')).toEqual([]);
	});

	it('stand on static files, which alone are kept', async () => {
		const folder = resolve(import.meta.dirname, '../../build/client/_app/immutable');
		const files = readdirSync(folder, { recursive: true, withFileTypes: true })
			.filter((entry) => entry.isFile() && /\.(js|css|woff2)$/.test(entry.name))
			.map((entry) => `/_app/immutable${entry.parentPath.slice(folder.length)}/${entry.name}`);
		expect(files.length).toBeGreaterThan(20);
		for (const path of files) {
			const answer = await ask(bank.origin, { path });
			expect(answer.status, path).toBe(200);
			expect(faultsOf(answer, forever), path).toEqual([]);
			const again = await ask(bank.origin, {
				path,
				headers: { 'if-none-match': String(answer.headers.etag) }
			});
			expect(again.status, path).toBe(304);
			expect(faultsOf(again, forever), path).toEqual([]);
		}
		for (const path of ['/_app/version.json', '/favicon.svg']) {
			const answer = await ask(bank.origin, { path });
			expect(answer.status, path).toBe(200);
			expect(faultsOf(answer), path).toEqual([]);
		}
	});

	it('make downloads of what is data', async () => {
		const downloads = table.filter(
			({ route, method }) =>
				method === 'GET' && groupOf(route) === 'desk' && /\.(csv|txt|json)$|\/file$/.test(route)
		);
		expect(downloads.length).toBeGreaterThan(8);
		for (const row of downloads) {
			const { asked } = casesOf(row, bank)[0]!;
			const { status, headers } = await ask(bank.origin, signedIn(asked, 'auditor'));
			expect(status, asked.path).toBe(200);
			expect(headers['content-disposition'], asked.path).toMatch(/^attachment; filename="[A-Za-z0-9.-]+"/);
			expect(headers['content-security-policy'], asked.path).toContain("default-src 'none'");
		}
	});
});
