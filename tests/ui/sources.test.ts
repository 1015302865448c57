import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const room = fileURLToPath(new URL('../../src/lib/ui/', import.meta.url));
const files = readdirSync(room, { recursive: true, encoding: 'utf8' })
	.filter((name) => /\.(svelte|ts|css)$/.test(name))
	.map((name) => [name, readFileSync(room + name, 'utf8')] as const);

describe('every component', () => {
	it('is found', () => {
		expect(files.length).toBeGreaterThan(40);
	});

	it.each(files)('%s: no inline style, which the content policy blocks', (_, source) => {
		expect(source).not.toMatch(/\sstyle=|\sstyle:[a-z]/);
	});

	it.each(files)('%s: colours only through tokens', (_, source) => {
		expect(source).not.toMatch(/#[0-9a-f]{3}(?:[0-9a-f]{3})?\b(?=[;'",)\s])|\brgba?\(|\bhsla?\(/i);
	});

	it.each(files)('%s: no server code and no fetch', (name, source) => {
		expect(source).not.toMatch(/\$lib\/server/);
		// A passkey ceremony must ask the server for its challenge.
		if (name !== 'step-up.ts') expect(source).not.toMatch(/\bfetch\(/);
	});
});
