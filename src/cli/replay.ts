import { rootOf } from '$lib/chain/merkle';
import { handle } from '$lib/server/db/handle';
import { NoRegister, openEvidence } from '$lib/server/log/evidence';
import { entryTexts, replay, ReplayStopped } from '$lib/server/log/replay';
import { tableCounts } from '$lib/server/log/table-counts';
import { projectors } from '$lib/server/projectors';
import { join } from 'node:path';

/** `replay <data folder>`: rebuilds the register from its entries in memory and prints what came of it. */
export default async (args: string[]): Promise<number> => {
	const [folder, ...rest] = args;
	if (folder === undefined || rest.length > 0) {
		process.stderr.write('Usage: npm run keelbook -- replay <data folder>\n');
		return 64;
	}
	let source;
	try {
		source = openEvidence(join(folder, 'keelbook.db'));
	} catch (cause) {
		if (!(cause instanceof NoRegister)) throw cause;
		process.stderr.write(`${cause.message}\n`);
		return 65;
	}
	try {
		const start = process.hrtime.bigint();
		const again = await replay(entryTexts(handle(source)), projectors);
		const seconds = Number(process.hrtime.bigint() - start) / 1e9;
		const { frontier } = again;
		for (const [table, rows] of tableCounts(again.sqlite))
			process.stdout.write(`${table.padEnd(20)} ${rows} rows\n`);
		process.stdout.write(
			`${frontier.size} entries in ${seconds.toFixed(2)} s, ${Math.round(frontier.size / seconds)} entries/s\n` +
				`root ${rootOf(frontier).toString('hex')}\n`
		);
		again.close();
		return 0;
	} catch (cause) {
		if (!(cause instanceof ReplayStopped)) throw cause;
		process.stderr.write(`Replay stopped at ${cause.message}\n`);
		return 1;
	} finally {
		source.close();
	}
};
