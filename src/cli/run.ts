import { readFileSync, writeFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { engineVersion } from '$lib/battery/engine';
import { parsePolicy, textDigest } from '$lib/battery/policy-file';
import { runBattery } from '$lib/battery/run-battery';
import { digestOf } from '$lib/chain/digest';
import { Invalid, type Issue } from '$lib/domain/faults';
import type { ParsedTable } from '$lib/domain/lineage';
import type { Policy } from '$lib/domain/policy';
import type { RunRequest } from '$lib/domain/run';
import type { RunResult } from '$lib/domain/run-result';
import { parseSpecification } from '$lib/domain/specification-issues';
import { parseUpload } from '$lib/server/lineage/parse';
import { latestRelease, policyReleases } from '$lib/server/policy/released';
import { reportText } from './run-report';

const usage = `Usage: npm run keelbook -- run --spec <specification.json> --data <data.csv> [--policy <policy.yaml>]
         [--tier <1, 2 or 3>] [--seed <whole number>] [--out <result.json>]
`;

/** Exit codes of sysexits.h: usage, data that cannot be used, input that cannot be read, output that cannot be made. */
const codes = { done: 0, usage: 64, data: 65, input: 66, output: 73 } as const;

/** Ends the command with a message. */
class Ended extends Error {
	constructor(
		readonly code: number,
		message: string
	) {
		super(message);
	}
}

const options = {
	spec: { type: 'string' },
	data: { type: 'string' },
	policy: { type: 'string' },
	tier: { type: 'string', default: '1' },
	seed: { type: 'string', default: '1' },
	out: { type: 'string' }
} as const;

const argumentsOf = (args: string[]) => {
	try {
		const { values } = parseArgs({ args, options, strict: true });
		const { spec, data } = values;
		if (spec === undefined || data === undefined)
			throw new Ended(codes.usage, `--spec and --data are needed.\n${usage}`);
		const [tier, seed] = [Number(values.tier), Number(values.seed)];
		if (!Number.isInteger(tier) || !Number.isInteger(seed) || seed < 0 || seed > 4294967295)
			throw new Ended(codes.usage, `--tier and --seed are whole numbers.\n${usage}`);
		return { ...values, spec, data, tier, seed };
	} catch (error) {
		if (error instanceof Ended) throw error;
		throw new Ended(codes.usage, `${error instanceof Error ? error.message : String(error)}\n${usage}`);
	}
};

const bytesOf = (path: string): Buffer => {
	try {
		return readFileSync(path);
	} catch (error) {
		throw new Ended(
			codes.input,
			`${path} cannot be read: ${error instanceof Error ? error.message : String(error)}`
		);
	}
};

const issueText = (file: string, issues: readonly Issue[]): string =>
	issues
		.map(({ pointer, message }) => `${file}${pointer === '' ? '' : ` ${pointer}`}: ${message}`)
		.join('\n');

/** Runs a reading of a file; what is wrong with it is said with the file's name and the field. */
const reading = <T>(file: string, work: () => T): T => {
	try {
		return work();
	} catch (error) {
		if (error instanceof Invalid) throw new Ended(codes.data, issueText(file, error.issues));
		throw error;
	}
};

const jsonOf = (file: string, text: string): unknown => {
	try {
		return JSON.parse(text);
	} catch (error) {
		throw new Ended(
			codes.data,
			`${file} is not JSON: ${error instanceof Error ? error.message : String(error)}`
		);
	}
};

const tableOf = async (file: string, bytes: Buffer): Promise<ParsedTable> => {
	const parsed = await parseUpload({ bytes, choices: {} });
	if (parsed.state === 'parsed') return parsed.table;
	throw new Ended(codes.data, issueText(file, parsed.issues));
};

/** The policy of a file, or the newest release; whether it is a released one is said in the report. */
const policyFrom = (file: string | undefined): { policy: Policy; digest: string; released: boolean } => {
	if (file === undefined) {
		const { policy, digest } = latestRelease();
		return { policy, digest, released: true };
	}
	const text = bytesOf(file).toString('utf8');
	const digest = textDigest(text);
	const policy = reading(file, () => parsePolicy(text, file));
	return { policy, digest, released: policyReleases().some((release) => release.digest === digest) };
};

const compute = async (args: string[]): Promise<{ result: RunResult; released: boolean; out?: string }> => {
	const given = argumentsOf(args);
	const specification = reading(given.spec, () =>
		parseSpecification(jsonOf(given.spec, bytesOf(given.spec).toString('utf8')))
	);
	const bytes = bytesOf(given.data);
	const data = await tableOf(given.data, bytes);
	const { policy, digest, released } = policyFrom(given.policy);
	const request: RunRequest = {
		specification,
		vintage: digestOf(bytes),
		policy: digest,
		tier: given.tier,
		settings: [],
		seed: given.seed,
		purpose: 'exploratory',
		engine: engineVersion
	};
	const result = reading(given.spec, () => runBattery(request, policy, data));
	return { result, released, ...(given.out !== undefined && { out: given.out }) };
};

/**
 * `keelbook run`: the battery on a specification and a data file, without server or sign-in. Prints a table; `--out`
 * writes the whole result. Exit codes: 0 computed, whatever the verdicts; 64 wrong call; 65 specification, data or policy
 * that cannot be used; 66 a file that cannot be read; 73 a result that cannot be written.
 */
export default async function run(args: string[]): Promise<number> {
	try {
		const { result, released, out } = await compute(args);
		if (out !== undefined) {
			try {
				writeFileSync(out, `${JSON.stringify(result, undefined, '\t')}\n`);
			} catch (error) {
				throw new Ended(
					codes.output,
					`${out} cannot be written: ${error instanceof Error ? error.message : String(error)}`
				);
			}
		}
		process.stdout.write(reportText(result, released));
		return codes.done;
	} catch (error) {
		if (!(error instanceof Ended)) throw error;
		process.stderr.write(error.message.endsWith('\n') ? error.message : `${error.message}\n`);
		return error.code;
	}
}
