import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ask } from './ask';
import { openBank } from './bank';
import { casesOf } from './cases';
import { foundRoutes } from './found';
import { personasOf } from './personas';
import { table } from './table';
import { asPersona, entered, walk, type Watched } from './walk';

let watched: Watched;

beforeAll(async () => {
	const bank = await openBank();
	// The session that expires was open when the server started.
	await bank.nextMinute(30);
	// Sessions that are over end at their first use, in an entry each.
	for (const persona of personasOf(bank))
		if (persona.kind === 'over')
			await ask(bank.origin, { path: '/account', headers: { cookie: `keelbook-local=${persona.cookie}` } });
	watched = { bank, seen: bank.entriesAfter(-1).at(-1)!.seq };
});
afterAll(() => watched.bank.close());

describe('the table of routes', () => {
	it('has a row for every route and method, and no other', async () => {
		const name = ({ route, method }: { route: string; method: string }): string => `${method} ${route}`;
		const found = (await foundRoutes()).map(name).sort();
		expect([...new Set(table.map(name))].sort()).toEqual(found);
	});

	it('names every model or person that stands in an address', () => {
		const nameless = table.filter(({ route, about }) => route.includes('[') && about === undefined);
		expect(nameless).toEqual([]);
	});
});

describe('a method that a route does not offer', () => {
	it('is not allowed, and the answer says which are', async () => {
		const found = await foundRoutes();
		const wrong: string[] = [];
		for (const route of new Set(found.map((each) => each.route))) {
			const offered = found.filter((each) => each.route === route).map(({ method }) => method.split(' ')[0]);
			const row = { ...table.find((each) => each.route === route)!, method: 'GET' as const };
			const { asked } = casesOf(row, watched.bank)[0]!;
			const owner = personasOf(watched.bank).find(({ name }) => name === 'owner')!;
			for (const method of ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'].filter(
				(each) => !offered.includes(each)
			)) {
				const sent = asPersona(watched.bank, { reference: 'own', asked: { ...asked, method } }, owner);
				const { status, headers } = await ask(watched.bank.origin, {
					...sent,
					headers: { ...sent.headers, origin: watched.bank.origin }
				});
				const allowed = headers.allow?.split(', ') ?? [];
				if (status !== 405 || !offered.every((each) => allowed.includes(each!)))
					wrong.push(`${method} ${route}: ${status}, ${headers.allow}`);
			}
		}
		expect(wrong, wrong.join('\n')).toEqual([]);
		expect(entered(watched)).toEqual([]);
	});
});

describe('whoever is gone', () => {
	it('has no session any more', () => {
		const { bank } = watched;
		const ended = bank
			.entriesAfter(-1)
			.filter(({ type }) => type === 'session.closed')
			.map(({ payload }) => payload as { person: string; reason: string });
		expect(ended).toContainEqual(expect.objectContaining({ person: bank.people.leaver, reason: 'disabled' }));
		expect(ended).toContainEqual(expect.objectContaining({ person: bank.people.owner, reason: 'idle' }));
	});
});

describe('everybody at every route', () => {
	for (const row of table)
		it([row.method, row.route, row.what].filter(Boolean).join(' · '), async () => {
			const wrong = await walk(watched, row);
			expect(wrong, wrong.join('\n')).toEqual([]);
		});
});
