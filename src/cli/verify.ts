import { BadVerifierKey } from '$lib/chain/verifier-key';
import { NoRegister } from '$lib/server/log/evidence';
import { verifyRegister } from '$lib/server/log/verify';
import type { Report } from '$lib/server/log/verify/report';
import { projectors } from '$lib/server/projectors';
import { join } from 'node:path';
import { parseArgs } from 'node:util';

const usage = 'Usage: npm run keelbook -- verify <data folder> [--key <verifier key>] [--json]\n';

const show = (value: unknown): string => (value === undefined ? '' : String(value));

/** The report in lines for people. A fault and what was not checked never share a line. */
export const reportLines = (report: Report): string[] => {
	const lines = [
		`log         ${report.origin ?? 'unknown'}`,
		`entries     ${report.entries}`,
		`root        ${report.root ?? ''}`,
		`nodes       ${report.nodes}`,
		`checkpoints ${report.checkpoints}`,
		`blobs       ${report.blobs}`,
		`projected   ${report.rows} rows in ${report.tables} tables`
	];
	for (const { part, where, words, more } of report.faults)
		lines.push(`FAULT ${part}: ${where} ${words}${more > 0 ? ` (and ${more} more)` : ''}`);
	if (report.differences.length > 0) {
		lines.push('table | key | column | live | replayed | entry');
		for (const { table, key, column, live, replayed, entry } of report.differences)
			lines.push(
				[table, key, column, live, replayed, entry === null ? '' : `E-${entry}`].map(show).join(' | ')
			);
	}
	for (const words of report.notChecked) lines.push(`NOT CHECKED ${words}`);
	for (const words of report.remarks) lines.push(`note: ${words}`);
	if (report.unvouched)
		lines.push(
			`note: the checkpoints are signed by the key that E-0 names, which nobody vouched for (${report.verifierKey ?? 'none'}).`,
			'      Give the verifier key that was noted from the log page: --key <verifier key>'
		);
	lines.push(
		report.faults.length > 0
			? 'Not sound.'
			: report.unvouched
				? 'Sound, with a key that nobody vouched for.'
				: 'Sound.'
	);
	return lines;
};

/** 0 sound · 1 a fault · 2 sound, but the key is vouched for by nobody. */
const exitCode = ({ faults, unvouched }: Report): number => (faults.length > 0 ? 1 : unvouched ? 2 : 0);

/** `verify <data folder>`: proves that the log and every table made from it are what was written. */
export default async (args: string[]): Promise<number> => {
	let parsed;
	try {
		parsed = parseArgs({
			args,
			allowPositionals: true,
			options: { key: { type: 'string' }, json: { type: 'boolean', default: false } }
		});
	} catch (cause) {
		process.stderr.write(`${cause instanceof Error ? cause.message : String(cause)}\n${usage}`);
		return 64;
	}
	const { positionals, values } = parsed;
	const [folder] = positionals;
	if (folder === undefined || positionals.length > 1) {
		process.stderr.write(usage);
		return 64;
	}
	try {
		const file = join(folder, 'keelbook.db');
		const report = await verifyRegister({
			file,
			projectors,
			...(values.key !== undefined && { key: values.key })
		});
		process.stdout.write(values.json ? `${JSON.stringify(report)}\n` : `${reportLines(report).join('\n')}\n`);
		return exitCode(report);
	} catch (cause) {
		if (!(cause instanceof NoRegister || cause instanceof BadVerifierKey)) throw cause;
		process.stderr.write(`${cause.message}\n`);
		return cause instanceof NoRegister ? 65 : 64;
	}
};
