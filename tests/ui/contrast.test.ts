import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync(new URL('../../src/app.css', import.meta.url), 'utf8');
type Theme = 'light' | 'dark';
type Tokens = ReadonlyMap<string, Readonly<Record<Theme, string>>>;

const tokens: Tokens = new Map(
	[...css.matchAll(/--([a-z-]+): light-dark\((#[0-9a-f]{6}), (#[0-9a-f]{6})\)/g)].map(
		([, name = '', light = '', dark = '']) => [name, { light, dark }]
	)
);

/** Relative luminance after WCAG 2.2. */
function luminance(hex: string): number {
	const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
		const part = parseInt(hex.slice(at, at + 2), 16) / 255;
		return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
	});
	return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(one: string, other: string, theme: Theme): number {
	const [a, b] = [one, other].map((name) => luminance(tokens.get(name)?.[theme] ?? ''));
	return (Math.max(a!, b!) + 0.05) / (Math.min(a!, b!) + 0.05);
}

/** Ground and the tokens that words on it may have. */
const WORDS = {
	water: ['ink', 'faded', 'deep', 'ochre', 'limit', 'rule'],
	sheet: ['ink', 'faded', 'deep', 'ochre', 'limit'],
	shallow: ['ink', 'faded', 'deep', 'ochre', 'limit'],
	buff: ['ink', 'faded', 'deep', 'limit'],
	'limit-wash': ['ink', 'limit', 'deep'],
	ink: ['water'],
	deep: ['water']
} as const;
const pairs = Object.entries(WORDS).flatMap(([ground, words]) =>
	words.map((word) => [word, ground] as const)
);

/** Shapes need 3:1 (WCAG 1.4.11): plot lines, the focus ring, edges of fields. */
const SHAPES = [
	['limit', 'water'],
	['deep', 'water'],
	['ochre', 'water'],
	['faded', 'water'],
	['faded', 'sheet']
] as const;

describe.each(['light', 'dark'] as const)('contrast, %s', (theme) => {
	it.each(pairs)('words in %s on %s reach 4.5:1', (word, ground) => {
		expect(contrast(word, ground, theme)).toBeGreaterThanOrEqual(4.5);
	});

	it.each(SHAPES)('shapes in %s on %s reach 3:1', (shape, ground) => {
		expect(contrast(shape, ground, theme)).toBeGreaterThanOrEqual(3);
	});
});

describe('tokens', () => {
	it('all have two values', () => {
		expect([...tokens.keys()]).toEqual(
			'water sheet hair rule ink faded shallow deep buff ochre limit limit-wash'.split(' ')
		);
	});

	it('agree with WCAG on black and white', () => {
		expect((luminance('#ffffff') + 0.05) / (luminance('#000000') + 0.05)).toBeCloseTo(21, 10);
	});
});
