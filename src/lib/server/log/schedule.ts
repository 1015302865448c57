import type { EventType } from '$lib/domain/events';

/** After any other entry a checkpoint follows within this time, in milliseconds. */
const longest = 60_000;

/** After these a checkpoint follows at once. */
const atOnce: ReadonlySet<EventType> = new Set(['log.opened', 'policy.adopted', 'role.granted']);

/** Decides when the head is signed: at once after weighty entries, otherwise a little later, many entries together. */
export const scheduleCheckpoints = (
	sign: () => unknown,
	report: (cause: unknown) => void = (cause) => console.error('checkpoint not signed', cause)
): { readonly settled: (types: readonly EventType[]) => void; readonly stop: () => void } => {
	let timer: NodeJS.Timeout | undefined;
	const signNow = (): void => {
		clearTimeout(timer);
		timer = undefined;
		try {
			sign();
		} catch (cause) {
			// The entries are durable and acknowledged whatever becomes of the signature.
			report(cause);
		}
	};
	return {
		settled: (types) => {
			if (types.some((type) => atOnce.has(type))) signNow();
			else if (!timer) timer = setTimeout(signNow, longest).unref();
		},
		stop: () => clearTimeout(timer)
	};
};
