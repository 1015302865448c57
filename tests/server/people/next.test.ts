import { expect, test } from 'vitest';
import { nextPath } from '../../../src/routes/(door)/next';

test.each([
	'/',
	'/models',
	'/models/M-014?find=loan&sort=-due',
	'/log/12',
	'/runs/compare?a=R-0001&b=R-0002'
])('leads to %s', (path) => {
	expect(nextPath(path)).toBe(path);
});

test.each([
	null,
	'',
	'models',
	'//x.example',
	'/\\x.example',
	'https:x.example',
	'https://x.example/models',
	'/%09/x',
	'/..//x.example',
	'/models/../..//x',
	'/models\r\nset-cookie: a=b',
	'javascript:alert(1)',
	'/sign-in',
	'/unknown/area',
	`/models?${'a'.repeat(2048)}`,
	'/models#fragment',
	'/mod els'
])('leads to the desk instead of %j', (path) => {
	expect(nextPath(path)).toBe('/');
});
