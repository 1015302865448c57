import type { Ctx, Facts, People, Projectors } from '$lib/server/context';
import type { Config } from '$lib/server/config';
import { openLog, type OpenedLog } from '$lib/server/log/open';
import { people } from '$lib/server/people/directory';
import { releasedPolicies } from '$lib/server/policy/released';
import { projectors as everyProjector } from '$lib/server/projectors';
import { modelFacts, partiesOf } from '$lib/server/register/facts';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { testClock, type Clock } from './clock';

/** A real register in a folder of its own: file database, log opened, clock that the test moves. */
export interface TestRegister {
	readonly ctx: Ctx;
	readonly clock: Clock;
	readonly opened: OpenedLog;
	readonly folder: string;
	/** Closes the file and removes the folder. */
	readonly close: () => void;
}

export interface TestRegisterOptions {
	/** Instant the clock starts at. */
	readonly at?: string;
	readonly projectors?: Projectors;
	readonly facts?: Facts;
	readonly people?: People;
	readonly demo?: boolean;
}

/** Opens a fresh register; remember to close it. */
export const testRegister = async (options: TestRegisterOptions = {}): Promise<TestRegister> => {
	const folder = mkdtempSync(join(tmpdir(), 'keelbook-'));
	const clock = testClock(options.at ?? '2026-03-02T09:00:00.000Z');
	const config: Config = {
		data: folder,
		origin: 'http://localhost:3000',
		institution: 'Test bank',
		demo: options.demo ?? false,
		zone: 'Europe/Berlin',
		logKeyFile: join(folder, 'log-key.pem')
	};
	const projectors = options.projectors ?? everyProjector;
	const opened = await openLog({
		file: join(folder, 'keelbook.db'),
		keyFile: config.logKeyFile,
		address: config.origin,
		institution: config.institution,
		demo: config.demo,
		projectors,
		now: clock.now
	});
	const known = { config, now: clock.now, blobs: opened.blobs, policies: releasedPolicies() };
	const ctx: Ctx = {
		...known,
		read: opened.read,
		write: opened.write,
		log: opened.log,
		projectors,
		facts: options.facts ?? {
			model: (handle, ref) => modelFacts(known, handle, ref),
			parties: partiesOf
		},
		people: options.people ?? people(opened.read),
		// No test of a room computes: runs have tests of their own with a real pool.
		pool: undefined as unknown as Ctx['pool']
	};
	return {
		ctx,
		clock,
		opened,
		folder,
		close: () => {
			opened.close();
			rmSync(folder, { recursive: true, force: true });
		}
	};
};
