import { verifierText } from '$lib/chain/verifier-key';
import { provesEntry } from '$lib/chain/proof-text';
import { Absent, Invalid, Refused } from '$lib/domain/faults';
import { strictLogQuery } from '$lib/server/exports/log-query';
import { checkpointView, entriesAfter, entryView, logPage } from '$lib/server/exports/log-view';
import { adoptReleased } from '$lib/server/policy/policy';
import type { Actor } from '$lib/domain/actor';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { idOf, person } from '../../support/people';
import { testRegister, type TestRegister } from '../../support/register';
import { enter } from '../log/history';

let register: TestRegister;
let owner: Actor;
let stranger: Actor;
let validator: Actor;
let auditor: Actor;
let admin: Actor;
let first: number;

const registered = (model: string, by: Actor): number =>
	enter(register, 'model.registered', [model], {
		model,
		name: `Model ${model}`,
		purpose: 'Forecasts deposit volumes',
		portfolio: 'Retail deposits',
		uses: ['IFRS 9'],
		owner: idOf(by),
		developers: [],
		answers: []
	});

beforeAll(async () => {
	register = await testRegister();
	register.ctx.write((tx) => adoptReleased(register.ctx, tx));
	owner = person(register, { name: 'Olive Own', roles: ['owner'] });
	stranger = person(register, { name: 'Sam Stray', roles: ['owner'] });
	validator = person(register, { roles: ['validator'] });
	auditor = person(register, { roles: ['auditor'] });
	admin = person(register, { roles: ['admin'] });
	first = registered('M-001', owner);
	registered('M-002', validator);
	for (let k = 0; k < 120; k++)
		enter(register, 'model.edited', [k % 3 === 0 ? 'M-001' : 'M-002'], {
			model: k % 3 === 0 ? 'M-001' : 'M-002',
			name: `Name ${k}`
		});
	register.ctx.log.signCheckpoint();
});
afterAll(() => register.close());

const filterOf = (query: string) => strictLogQuery(register.ctx.read, new URLSearchParams(query));

describe('a page of the log', () => {
	test('shows the newest first, in words and with what each entry changed', () => {
		const { entries, whole, newer } = logPage(register.ctx, auditor, {});
		expect(entries).toHaveLength(50);
		expect(whole).toBe(true);
		expect(newer).toBeUndefined();
		expect(entries[0]).toMatchObject({
			sentence: 'The register changed name of M-002.',
			actor: { id: 'system', name: 'the register' }
		});
		expect(entries[0]!.changes).toEqual([
			{ table: 'model', row: 'M-002', before: { name: 'Name 118' }, after: { name: 'Name 119' } }
		]);
	});

	test('reads on by folio to the oldest and back, without a gap or a repetition', () => {
		const size = register.ctx.log.frontier().size;
		const seen: number[] = [];
		let page = logPage(register.ctx, auditor, {});
		seen.push(...page.entries.map(({ seq }) => seq));
		while (page.older !== undefined) {
			page = logPage(register.ctx, auditor, {}, { below: page.older });
			seen.push(...page.entries.map(({ seq }) => seq));
		}
		expect(seen).toEqual(Array.from({ length: size }, (_, k) => size - 1 - k));
		const oldest = page.entries.map(({ seq }) => seq);
		page = logPage(register.ctx, auditor, {}, { above: page.newer! });
		expect(page.entries.at(-1)!.seq).toBe(oldest[0]! + 1);
		expect(page.older).toBe(oldest[0]! + 1);
	});

	test('filters by type, subject, actor, folio and day, together', () => {
		const all = (query: string) => logPage(register.ctx, auditor, filterOf(query)).entries;
		expect(all('type=model.registered').map(({ subjects }) => subjects[0]!.ref)).toEqual(['M-002', 'M-001']);
		expect(all('subject=M-001&type=model.edited')).toHaveLength(40);
		expect(all(`after=E-${first - 1}&before=${first + 1}`).map(({ seq }) => seq)).toEqual([first]);
		expect(all('after=2026-03-03')).toEqual([]);
		expect(all('after=2026-03-02&type=model.registered')).toHaveLength(2);
		expect(all('before=2026-03-02')).toEqual([]);
		expect(all('actor=cli')).toEqual([]);
	});

	test.each([
		'after=yesterday',
		'before=2026-02-30',
		'type=DROP',
		'actor=Anna',
		`subject=${'x'.repeat(201)}`
	])('refuses a filter it cannot read: %s', (query) => expect(() => filterOf(query)).toThrow(Invalid));
});

describe('who sees what', () => {
	test('validator, head and auditor see all of it', () => {
		expect(logPage(register.ctx, validator, {}).whole).toBe(true);
		expect(entryView(register.ctx, auditor, 0).sentence).toBe('The register opened the log of Test bank.');
	});

	test('an owner sees the entries about their own models', () => {
		const { entries, whole } = logPage(register.ctx, owner, {});
		expect(whole).toBe(false);
		expect(entries.every(({ subjects }) => subjects.some(({ ref }) => ref === 'M-001'))).toBe(true);
		expect(entriesAfter(register.ctx, owner, {}).entries.map(({ seq }) => seq)[0]).toBe(first);
		expect(entryView(register.ctx, owner, first).seq).toBe(first);
		expect(() => entryView(register.ctx, owner, first + 1)).toThrow(Absent);
		expect(() => entryView(register.ctx, owner, 0)).toThrow(Absent);
	});

	test('an owner of nothing and an admin are refused', () => {
		for (const actor of [stranger, admin]) {
			expect(() => logPage(register.ctx, actor, {})).toThrow(Refused);
			expect(() => entryView(register.ctx, actor, first)).toThrow(Refused);
			expect(() => checkpointView(register.ctx, actor)).toThrow(Refused);
		}
	});

	test('names stand in the words, ids in the bytes', () => {
		const view = entryView(register.ctx, auditor, first);
		expect(view.text).toContain(idOf(owner));
		expect(view.text).not.toContain('Olive');
		expect(JSON.stringify(view.changes)).toContain('Olive Own');
	});
});

describe('evidence of an entry', () => {
	test('its proof verifies against its bytes with the key of the log', () => {
		const { proof, text, verifierKey } = entryView(register.ctx, auditor, first);
		expect(verifierKey).toBe(verifierText(register.ctx.log.verifier));
		expect(provesEntry(proof!, Buffer.from(text), register.ctx.log.verifier)).toBe(true);
		expect(provesEntry(proof!, Buffer.from(`${text} `), register.ctx.log.verifier)).toBe(false);
	});

	test('an entry that no checkpoint covers yet has no proof', () => {
		const seq = enter(register, 'model.edited', ['M-001'], { model: 'M-001', name: 'Newest' });
		expect(entryView(register.ctx, auditor, seq).proof).toBeUndefined();
		register.ctx.log.signCheckpoint();
		expect(entryView(register.ctx, auditor, seq).proof).toContain(`index ${seq}\n`);
	});

	test('an entry that is not there is absent', () => {
		expect(() => entryView(register.ctx, auditor, 10_000)).toThrow(Absent);
	});
});

test('programs read forwards by folio', () => {
	const page = entriesAfter(register.ctx, auditor, {});
	expect(page.entries.map(({ seq }) => seq)).toEqual(Array.from({ length: 100 }, (_, k) => k));
	const next = entriesAfter(register.ctx, auditor, filterOf(`after=${page.next}`));
	expect(next.entries[0]!.seq).toBe(100);
	expect(next.next).toBeUndefined();
});
