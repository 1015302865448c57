import { existsSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { MessageChannel, type MessagePort } from 'node:worker_threads';
import { Piscina } from 'piscina';
import type { parseUpload } from '$lib/server/lineage/parse';
import type { Computed, ComputeTask, Progress } from './task';

type ParseInput = Parameters<typeof parseUpload>[0];
type ParseOutcome = Awaited<ReturnType<typeof parseUpload>>;

export interface TaskOptions {
	/** Ends the thread, even in an endless loop. */
	readonly signal?: AbortSignal;
}

export interface ComputeOptions extends TaskOptions {
	/** Called with how far the thread is; the first call says that it began. */
	readonly progress?: (progress: Progress) => void;
}

/** Threads beside the one that answers requests: runs are computed and files parsed there. */
export interface Pool {
	readonly compute: (task: ComputeTask, options?: ComputeOptions) => Promise<Computed>;
	readonly parse: (input: ParseInput, options?: TaskOptions) => Promise<ParseOutcome>;
	/** True from the moment of closing: what ends then did not fail. */
	readonly closed: () => boolean;
	readonly close: () => Promise<void>;
}

// Built, this module lies at some depth under server/chunks beside worker.js; otherwise the source runs under tsx.
const built = import.meta.env.PROD;
const filename = built
	? fileURLToPath(new URL('worker.js', import.meta.url.replace(/server\/chunks\/.*$/, '')))
	: fileURLToPath(new URL('./worker-from-source.js', import.meta.url));

/** Tasks end with their own signal, and all of them when a thread cannot even start: they would wait for ever. */
const watched = (piscina: Piscina) => {
	const waiting = new Set<AbortController>();
	piscina.on('error', (fault: unknown) => {
		for (const controller of waiting) controller.abort(fault);
	});
	return async <T>(
		task: object,
		name: string,
		transfer: readonly MessagePort[],
		signal?: AbortSignal
	): Promise<T> => {
		const start = new AbortController();
		waiting.add(start);
		try {
			const signals = AbortSignal.any([start.signal, ...(signal ? [signal] : [])]);
			return (await piscina.run(task, { name, signal: signals, transferList: [...transfer] })) as T;
		} catch (fault) {
			if (!start.signal.aborted) throw fault;
			throw new Error('A thread could not start.', { cause: start.signal.reason });
		} finally {
			waiting.delete(start);
		}
	};
};

const threadsOf = (maxThreads: number, heap: number): Piscina =>
	new Piscina({
		filename,
		minThreads: 0,
		maxThreads,
		idleTimeout: 60_000,
		resourceLimits: { maxOldGenerationSizeMb: heap, stackSizeMb: 4 }
	});

/**
 * Opens the pool of threads; they start with the first task. Files are read by threads of their own, so that an upload
 * does not wait for a long run.
 * @throws Error when the file of the thread is missing
 */
export const createPool = (threads: number = Math.max(2, availableParallelism() - 1)): Pool => {
	if (!existsSync(filename)) throw new Error(`The program is incomplete: ${filename} is missing.`);
	const [computing, reading] = [threadsOf(threads, 1024), threadsOf(2, 256)];
	const [compute, read] = [watched(computing), watched(reading)];
	let closing = false;
	return Object.freeze({
		compute: async (task, { signal, progress } = {}) => {
			const { port1, port2 } = new MessageChannel();
			port1.on('message', (told: Progress) => progress?.(told));
			try {
				return await compute<Computed>({ ...task, port: port2 }, 'compute', [port2], signal);
			} finally {
				port1.close();
			}
		},
		parse: (input, { signal } = {}) => read<ParseOutcome>(input, 'parse', [], signal),
		closed: () => closing,
		close: async () => {
			closing = true;
			await Promise.all([computing.destroy(), reading.destroy()]);
		}
	} satisfies Pool);
};
