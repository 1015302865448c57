import { createHash } from 'node:crypto';
import { parse } from 'yaml';
import { Invalid } from '$lib/domain/faults';
import { policySchema, type Policy } from '$lib/domain/policy';

/** A released policy: the file's name, the digest of its bytes, and what it says. */
export interface PolicyRelease {
	readonly name: string;
	readonly digest: string;
	readonly policy: Policy;
}

/** `sha256:<64 hex>` of a text's UTF-8 bytes. */
export const textDigest = (text: string): string =>
	`sha256:${createHash('sha256').update(text, 'utf8').digest('hex')}`;

const fault = (name: string, message: string, pointer = ''): Invalid =>
	new Invalid([{ pointer, message: `${name}: ${message}` }]);

/** What LOCK says: the digest of each released file, by name; a line is `<file> sha256:<64 hex>`. */
export const parseLock = (text: string): ReadonlyMap<string, string> =>
	new Map(
		text
			.split('\n')
			.filter((line) => line.trim() !== '')
			.map((line, index) => {
				const parts = /^(\S+\.yaml) (sha256:[0-9a-f]{64})$/.exec(line);
				if (!parts) throw fault('LOCK', `line ${index + 1} is not "<file> sha256:<64 hex digits>".`);
				return [parts[1]!, parts[2]!] as const;
			})
	);

/** Lines the battery itself cannot do without. */
const neededLevels = ['query', 'fails', 'shown', 'against', 'interval'];

const incomplete = (policy: Policy): string | undefined => {
	const level = neededLevels.find((name) => !Object.hasOwn(policy.levels, name));
	if (level !== undefined) return `the level ${level} is missing`;
	const unknown = policy.tiers
		.flatMap(({ battery }) => battery)
		.find((id) => !Object.hasOwn(policy.checks, id));
	return unknown === undefined ? undefined : `the check ${unknown} stands in a battery and has no lines`;
};

/**
 * Reads the text of a policy file.
 *
 * @throws Invalid with a pointer per line that is not as it should be
 */
export const parsePolicy = (text: string, name: string): Policy => {
	let value: unknown;
	try {
		value = parse(text, { uniqueKeys: true, maxAliasCount: 0 });
	} catch (error) {
		throw fault(name, error instanceof Error ? error.message : 'it is not YAML');
	}
	const parsed = policySchema.safeParse(value);
	if (!parsed.success)
		throw new Invalid(
			parsed.error.issues.map(({ path, message }) => ({
				pointer: path.map((key) => `/${String(key)}`).join(''),
				message: `${name}: ${message}`
			}))
		);
	const missing = incomplete(parsed.data);
	if (missing !== undefined) throw fault(name, missing);
	return parsed.data;
};

/**
 * Reads a released policy file. A file that LOCK does not name, or whose bytes changed since its release, is refused.
 */
export const releasedPolicy = (
	name: string,
	text: string,
	lock: ReadonlyMap<string, string>
): PolicyRelease => {
	const digest = textDigest(text);
	const released = lock.get(name);
	if (released === undefined)
		throw fault(name, 'this policy file does not stand in LOCK; only released files are read.');
	if (released !== digest)
		throw fault(
			name,
			`this policy file was changed after its release (LOCK says ${released}, the file is ${digest}).`
		);
	return Object.freeze({ name, digest, policy: parsePolicy(text, name) });
};
