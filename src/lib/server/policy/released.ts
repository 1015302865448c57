import { parseLock, releasedPolicy, type PolicyRelease } from '$lib/battery/policy-file';
import type { Policy } from '$lib/domain/policy';

// The files are built into the program, so that nothing beside it can replace them.
const files = import.meta.glob<string>('/policies/*.yaml', { query: '?raw', import: 'default', eager: true });
const locks = import.meta.glob<string>('/policies/LOCK*', { query: '?raw', import: 'default', eager: true });

const readReleases = (): readonly PolicyRelease[] => {
	const lock = parseLock(locks['/policies/LOCK'] ?? '');
	return Object.entries(files)
		.map(([path, text]) => releasedPolicy(path.slice(path.lastIndexOf('/') + 1), text, lock))
		.sort((a, b) => a.policy.release.localeCompare(b.policy.release));
};

let releases: readonly PolicyRelease[] | undefined;

/** Every released policy, oldest first; throws `Invalid` when a file does not agree with LOCK. */
export const policyReleases = (): readonly PolicyRelease[] => (releases ??= readReleases());

/** The released policies by the digest of their files. */
export const releasedPolicies = (): ReadonlyMap<string, Policy> =>
	new Map(policyReleases().map(({ digest, policy }) => [digest, policy]));

/** The newest release. */
export const latestRelease = (): PolicyRelease => {
	const latest = policyReleases().at(-1);
	if (!latest) throw new Error('The program holds no released policy.');
	return latest;
};
