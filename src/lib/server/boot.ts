import { existsSync, mkdirSync, renameSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { engineVersion } from '$lib/battery/engine';
import { system } from '$lib/domain/actor';
import { version } from '../../../package.json';
import { clock, type Clock } from './clock';
import { readConfig, type Config } from './config';
import type { Ctx } from './context';
import type { Handle } from './db/handle';
import { takeLease } from './db/lease';
import { programOf } from './db/program';
import { seedDemo } from './demo/seed';
import { stageOf } from './demo/stage';
import { sweepSessions } from './auth/sessions';
import { openLog } from './log/open';
import { record } from './log/record';
import { people } from './people/directory';
import { firstLinks } from './people/first-start';
import { releasedPolicies } from './policy/released';
import { adoptReleased } from './policy/policy';
import { projectors } from './projectors';
import { modelFacts, partiesOf } from './register/facts';
import { startRuns } from './runs/execution';
import { createPool } from './runs/pool';
import { StartFault } from './start-fault';

/** An open register, and how to close it. */
export interface Opened {
	readonly ctx: Ctx;
	/** True when this call opened the log: nobody is enrolled yet. */
	readonly fresh: boolean;
	/** Ends the pool, signs the head of the log, closes the file. */
	readonly close: () => Promise<void>;
}

/** The folder of a register: made for its owner alone, refused when others may read it. */
const privateFolder = (folder: string, strict: boolean): void => {
	mkdirSync(folder, { recursive: true, mode: 0o700 });
	const open = (statSync(folder).mode & 0o077) !== 0;
	if (open && strict) throw new StartFault(77, `${folder} can be read by others; run: chmod 700 ${folder}`);
};

/** Opens the register of a folder and assembles what every verb is given. */
export const openRegister = async (config: Config, now: Clock): Promise<Opened> => {
	privateFolder(config.data, !config.demo);
	const lease = takeLease(join(config.data, 'writer.lock'));
	try {
		const opened = await openLog({
			file: join(config.data, 'keelbook.db'),
			keyFile: config.logKeyFile,
			address: config.origin,
			institution: config.institution,
			demo: config.demo,
			projectors,
			now
		});
		const pool = createPool();
		const known = { config, now, blobs: opened.blobs, policies: releasedPolicies() };
		const ctx: Ctx = Object.freeze({
			...known,
			read: opened.read,
			write: opened.write,
			log: opened.log,
			projectors,
			facts: Object.freeze({
				model: (handle: Handle, ref: string) => modelFacts(known, handle, ref),
				parties: partiesOf
			}),
			people: people(opened.read),
			pool
		});
		if (opened.fresh) ctx.write((tx) => adoptReleased(ctx, tx));
		return {
			ctx,
			fresh: opened.fresh,
			close: async () => {
				await pool.close();
				opened.close();
				lease.release();
			}
		};
	} catch (fault) {
		lease.release();
		throw fault;
	}
};

/** Enters which program serves the register from now on. */
const enterStart = (ctx: Ctx): void => {
	ctx.write((tx) =>
		record(
			ctx,
			tx,
			system('start'),
			{ rule: 'system' },
			{
				type: 'app.started',
				subjects: ['register'],
				payload: {
					version,
					engine: engineVersion,
					node: process.version,
					...programOf(ctx.read)
				}
			}
		)
	);
};

/** Makes the demo bank beside its place and moves it there whole: a start that is interrupted leaves no half of it. */
const makeDemo = async (config: Config, now: Clock): Promise<void> => {
	if (existsSync(join(config.data, 'keelbook.db'))) return;
	const partial: Config = {
		...config,
		data: `${config.data}.partial`,
		logKeyFile: `${config.logKeyFile}.partial`
	};
	for (const path of [partial.data, partial.logKeyFile, config.data])
		rmSync(path, { recursive: true, force: true });
	const stage = stageOf(now());
	const opened = await openRegister(partial, stage.now);
	try {
		await seedDemo(opened.ctx, stage);
	} finally {
		await opened.close();
	}
	renameSync(partial.logKeyFile, config.logKeyFile);
	renameSync(partial.data, config.data);
};

let current: Opened | undefined;

/** The register this process serves. */
export const register = (): Ctx => {
	if (!current) throw new Error('The register is not open.');
	return current.ctx;
};

/** Opens the register that the settings name, with every start-up check; called once, before the server listens. */
export const start = async (): Promise<void> => {
	const config = readConfig(process.env);
	const now = clock();
	if (config.demo) await makeDemo(config, now);
	const opened = await openRegister(config, now);
	current = opened;
	if (opened.fresh && !config.demo) {
		process.stdout.write(
			'The register is empty. Two administrators enrol with these links, each once, within 24 hours:\n'
		);
		for (const { url } of firstLinks(opened.ctx)) process.stdout.write(`  ${url}\n`);
	}
	sweepSessions(opened.ctx);
	enterStart(opened.ctx);
	startRuns(opened.ctx);
	process.once('sveltekit:shutdown' as never, () => {
		// The process leaves only after the last checkpoint is signed.
		void opened.close().finally(() => process.emit('keelbook:closed' as never));
	});
};
