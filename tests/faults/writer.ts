import { system } from '$lib/domain/actor';
import { leafHash } from '$lib/chain/merkle';
import { openLog } from '$lib/server/log/open';
import { record } from '$lib/server/log/record';
import { projectors } from '$lib/server/projectors';
import { writeSync } from 'node:fs';
import { join } from 'node:path';

/**
 * A process that writes without pause until it is killed. After each COMMIT it acknowledges every entry of the transaction
 * on standard output: folio and leaf hash.
 */
const [folder = '', key = ''] = process.argv.slice(2);
const opened = await openLog({
	file: join(folder, 'keelbook.db'),
	keyFile: key,
	address: 'http://localhost:3000',
	institution: 'Test bank',
	demo: false,
	projectors,
	now: () => new Date()
});
const { log, write, blobs } = opened;
const ctx = { log };
const owner = `p_${'a'.repeat(26)}`;
const by = system('kill');
const grant = { rule: 'test' };

const acknowledge = (seqs: readonly number[]): void => {
	const lines = seqs.map((seq) => {
		const row = opened.read.first<{ body: string }>(
			opened.read.q.selectFrom('entry').select('body').where('seq', '=', seq)
		);
		return `${seq} ${leafHash(Buffer.from(row!.body)).toString('hex')}\n`;
	});
	writeSync(1, lines.join(''));
};

for (let k = log.frontier().size; ; k++) {
	const model = `M-${String(k).padStart(3, '0')}`;
	const seqs = write((tx) => {
		const register = {
			model,
			name: 'x'.repeat(1 + (k % 500)),
			purpose: 'p',
			portfolio: 'q',
			uses: ['IFRS 9', 'ICAAP'],
			owner,
			developers: [],
			answers: [{ question: 'materiality' as const, score: 1 }]
		};
		const first = record(ctx, tx, by, grant, {
			type: 'model.registered',
			subjects: [model],
			payload: register
		});
		if (k % 3 > 0) return [first.seq];
		const document = blobs.put(tx, Buffer.alloc(1 + ((k * 977) % 60_000), k));
		const policy = { policy: document, release: 'r', document, changed: [] };
		const second = record(ctx, tx, by, grant, {
			type: 'policy.proposed',
			subjects: ['policy'],
			payload: policy
		});
		const edit = { model, uses: ['ICAAP'] };
		const third = record(ctx, tx, by, grant, { type: 'model.edited', subjects: [model], payload: edit });
		return [first.seq, second.seq, third.seq];
	});
	acknowledge(seqs);
	if (k % 10 === 0) log.signCheckpoint();
}
