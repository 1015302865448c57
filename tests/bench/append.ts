import { system } from '$lib/domain/actor';
import { openWriter } from '$lib/server/db/open';
import { openLog } from '$lib/server/log/open';
import { record } from '$lib/server/log/record';
import { entryTexts, replay } from '$lib/server/log/replay';
import { verifyRegister } from '$lib/server/log/verify';
import { projectors } from '$lib/server/projectors';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/**
 * Entries per second of append (with projection, tree and changes), of replay and of verify, beside a reference of the same
 * minute on the same machine: bare inserts of the same bytes into one table.
 */
const perTransaction = 100;

interface Took {
	/** Seconds on the wall, and of the processor: the latter hardly depend on what else the machine does. */
	readonly wall: number;
	readonly cpu: number;
}

const measured = async (work: () => unknown): Promise<Took> => {
	const start = process.hrtime.bigint();
	const before = process.cpuUsage();
	await work();
	const { user, system: kernel } = process.cpuUsage(before);
	return { wall: Number(process.hrtime.bigint() - start) / 1e9, cpu: (user + kernel) / 1e6 };
};

const say = (what: string, count: number, { wall, cpu }: Took, reference?: Took): void => {
	const ratio = reference === undefined ? '' : `  ${(cpu / reference.cpu).toFixed(1)} x the reference`;
	const rate = (took: number): string =>
		Math.round(count / took)
			.toString()
			.padStart(7);
	const each = ((cpu / count) * 1000).toFixed(3);
	process.stdout.write(
		`${what.padEnd(42)} ${rate(wall)} /s  ${rate(cpu)} /cpu s  ${each} ms cpu each${ratio}\n`
	);
};

const percentile = (sorted: readonly number[], share: number): string =>
	(sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))]! * 1000).toFixed(2);

export default async ([given = '20000']: string[]): Promise<void> => {
	const count = Number(given);
	const folder = mkdtempSync(join(tmpdir(), 'keelbook-bench-'));
	let tick = Date.parse('2026-01-01T00:00:00Z');
	const file = join(folder, 'keelbook.db');
	const opened = await openLog({
		file,
		keyFile: join(folder, 'log-key.pem'),
		address: 'http://localhost:3000',
		institution: 'Bench',
		demo: false,
		projectors,
		now: () => new Date((tick += 1000))
	});
	const ctx = { log: opened.log };
	const by = system('bench');
	const grant = { rule: 'bench' };
	const owner = `p_${'a'.repeat(26)}`;
	/** Half new models with uses and an owner, half edits: four rows and one row. */
	const enter = (k: number): void => {
		const model = `M-${String(k - (k % 2)).padStart(3, '0')}`;
		opened.write((tx) => enterIn(tx, k, model));
	};
	const enterIn = (tx: Parameters<Parameters<typeof opened.write>[0]>[0], k: number, model: string): void => {
		if (k % 2 === 0)
			record(ctx, tx, by, grant, {
				type: 'model.registered',
				subjects: [model],
				payload: {
					model,
					name: `Model ${model}`,
					purpose: 'Forecasts the volume of retail deposits under the macroeconomic scenarios of the bank.',
					portfolio: 'Retail deposits',
					uses: ['IFRS 9', 'ICAAP'],
					owner,
					developers: [],
					answers: [{ question: 'materiality', score: 2 }]
				}
			});
		else
			record(ctx, tx, by, grant, {
				type: 'model.edited',
				subjects: [model],
				payload: { model, name: `Model ${model}, second name` }
			});
	};
	try {
		const appended = await measured(() => {
			for (let from = 0; from < count; from += perTransaction)
				opened.write((tx) => {
					for (let k = from; k < from + perTransaction; k++)
						enterIn(tx, k, `M-${String(k - (k % 2)).padStart(3, '0')}`);
				});
		});
		const durable: number[] = [];
		for (let k = count; k < count + 500; k++) durable.push((await measured(() => enter(k))).wall);
		durable.sort((a, b) => a - b);

		const texts = [...entryTexts(opened.read)];
		const plain = openWriter(join(folder, 'plain.db'));
		plain.exec('create table plain (seq integer primary key, body text not null) strict');
		const insert = plain.prepare('insert into plain values (?, ?)');
		const bare = await measured(() => {
			for (let from = 0; from < count; from += perTransaction)
				plain.transaction(() => {
					for (let k = from; k < from + perTransaction; k++) insert.run(k, texts[k]);
				})();
		});
		plain.close();
		const bytes = texts.reduce((sum, text) => sum + text.length, 0);
		process.stdout.write(`${texts.length} entries of ${Math.round(bytes / texts.length)} bytes\n`);
		say('reference: bare inserts of the same bytes', count, bare);
		say('append, 100 entries a transaction', count, appended, bare);
		process.stdout.write(
			`durable write, one entry a transaction        p50 ${percentile(durable, 0.5)} ms  p99 ${percentile(durable, 0.99)} ms\n`
		);
		const again = await measured(async () => (await replay(texts, projectors)).close());
		say('replay into memory', texts.length, again, bare);
		opened.close();
		const verified = await measured(async () => {
			const { faults } = await verifyRegister({ file, projectors });
			if (faults.length > 0) throw new Error(JSON.stringify(faults));
		});
		say('verify, all of it with replay', texts.length, verified, bare);
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
};
