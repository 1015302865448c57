import { rootOf } from '$lib/chain/merkle';
import { verifierText } from '$lib/chain/verifier-key';
import Sqlite from 'better-sqlite3';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import replay from '../../src/cli/replay';
import verify from '../../src/cli/verify';
import { testRegister, type TestRegister } from '../support/register';
import { history } from '../server/log/history';

let register: TestRegister;
let key: string;
let out: string;
let err: string;

beforeEach(async () => {
	register = await testRegister();
	history(register);
	key = verifierText(register.ctx.log.verifier);
	register.opened.close();
	out = '';
	err = '';
	vi.spyOn(process.stdout, 'write').mockImplementation((text) => ((out += String(text)), true));
	vi.spyOn(process.stderr, 'write').mockImplementation((text) => ((err += String(text)), true));
});
afterEach(() => {
	vi.restoreAllMocks();
	rmSync(register.folder, { recursive: true, force: true });
});

const change = (sql: string): void => {
	const db = new Sqlite(join(register.folder, 'keelbook.db'));
	db.exec(sql);
	db.close();
};

describe('verify', () => {
	test('0: sound, with the key that was noted outside', async () => {
		expect(await verify([register.folder, '--key', key])).toBe(0);
		expect(out).toContain('entries     8\n');
		expect(out.trimEnd().endsWith('\nSound.')).toBe(true);
	});

	test('2: sound, but nobody vouches for the key', async () => {
		expect(await verify([register.folder])).toBe(2);
		expect(out).toContain('which nobody vouched for');
		expect(out).toContain(key);
	});

	test('1: a fault is named with table, key, column, both values and entry', async () => {
		change(`drop trigger model_gate_update; drop trigger model_kept_update;
			update model set name = 'Better' where ref = 'M-002'`);
		expect(await verify([register.folder, '--key', key])).toBe(1);
		expect(out).toContain(
			'FAULT table: model M-002 column name is "Better"; the log says "Model M-002", written by E-6'
		);
		expect(out).toContain('model | M-002 | name | Better | Model M-002 | E-6');
		expect(out).toContain('FAULT schema: trigger model_gate_update is missing');
		expect(out.trimEnd().endsWith('Not sound.')).toBe(true);
	});

	test('1: what was not checked stands on a line of its own', async () => {
		change('drop trigger entry_no_delete; pragma foreign_keys = off; delete from entry where seq = 3');
		expect(await verify([register.folder, '--key', key])).toBe(1);
		const lines = out.split('\n');
		expect(lines.some((line) => line.startsWith('FAULT entry: E-3 seq: it is missing'))).toBe(true);
		expect(lines.some((line) => line.startsWith('NOT CHECKED'))).toBe(true);
		expect(lines.filter((line) => line.includes('FAULT') && line.includes('NOT CHECKED'))).toEqual([]);
	});

	test('1: another key than the one noted', async () => {
		const other = 'PeterNeumann+c74f20a3+ARpc2QcUPDhMQegwxbzhKqiBfsVkmqq/LDE4izWy10TW';
		expect(await verify([register.folder, '--key', other])).toBe(1);
		expect(out).toContain('FAULT checkpoint: key');
	});

	test('a report for programs', async () => {
		expect(await verify([register.folder, '--key', key, '--json'])).toBe(0);
		expect(JSON.parse(out)).toMatchObject({ entries: 8, faults: [], verifierKey: key });
	});

	test.each([[[]], [['a', 'b']], [['a', '--nonsense']], [['.', '--key', 'x']]])('64: %j', async (args) => {
		expect(await verify(args)).toBe(64);
		expect(err).not.toBe('');
	});

	test('65: no register, and a file that is none', async () => {
		const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
		expect(await verify([folder])).toBe(65);
		writeFileSync(
			join(folder, 'keelbook.db'),
			'this is no database, though it has the name of one'.repeat(100)
		);
		expect(await verify([folder])).toBe(65);
		expect(err).toContain('is not a register');
		rmSync(folder, { recursive: true });
	});
});

describe('replay', () => {
	test('counts rows and entries', async () => {
		expect(await replay([register.folder])).toBe(0);
		expect(out).toMatch(/^model {16}2 rows$/m);
		expect(out).toMatch(/^8 entries in [\d.]+ s, \d+ entries\/s$/m);
		expect(out).toContain(`root ${rootOf(register.ctx.log.frontier()).toString('hex')}\n`);
	});

	test('stops at an entry it does not know', async () => {
		change(`drop trigger entry_no_update;
			update entry set type = 'model.praised', body = replace(body, 'model.edited', 'model.praised') where seq = 3`);
		expect(await replay([register.folder])).toBe(1);
		expect(err).toContain('Replay stopped at E-3: unknown event model.praised version 1');
	});

	test('64 and 65', async () => {
		expect(await replay([])).toBe(64);
		expect(await replay([join(register.folder, 'nowhere')])).toBe(65);
		writeFileSync(join(register.folder, 'keelbook.db'), 'this is no database'.repeat(100));
		expect(await replay([register.folder])).toBe(65);
	});
});
