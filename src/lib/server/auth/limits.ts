import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';

const minute = 60;
const hour = 3600;

/** Each limit by its name: how many, in how many seconds. Passkeys and passwords are counted apart. */
const table = {
	'passkey failures an address': { points: 50, duration: 10 * minute },
	'recovery failures an account': { points: 10, duration: 10 * minute },
	'recovery failures an address': { points: 50, duration: 10 * minute },
	'recovery codes an account': { points: 5, duration: hour },
	'enrolment links an address': { points: 10, duration: hour },
	'step-ups a person': { points: 10, duration: 10 * minute },
	// Reaches nobody's account: bounds the rows a stranger can make.
	'challenges an address': { points: 300, duration: 10 * minute }
} as const;

export type LimitName = keyof typeof table;

/** A limit is reached: answered 429 with the limit's name. */
export class TooMany extends Error {
	override readonly name = 'TooMany';
	constructor(
		readonly limit: LimitName,
		/** Seconds after which a try is worth while. */
		readonly after: number
	) {
		super(`Too many tries (${limit}). Try again in ${Math.ceil(after / 60)} min.`);
	}
}

/** Counts what failed; kept by whoever owns a register, so that two of them do not share it. */
export interface RateLimits {
	/** @throws TooMany when the limit is reached; counts nothing */
	check(limit: LimitName, key: string): Promise<void>;
	/** Counts one. */
	count(limit: LimitName, key: string): Promise<void>;
}

const limiters = (): Readonly<Record<LimitName, RateLimiterMemory>> => {
	const entries = Object.entries(table).map(([name, limit]) => [name, new RateLimiterMemory(limit)]);
	return Object.fromEntries(entries) as Record<LimitName, RateLimiterMemory>;
};

const rateLimits = (): RateLimits => {
	const by = limiters();
	return Object.freeze({
		check: async (limit: LimitName, key: string) => {
			const state = await by[limit].get(key);
			if (state && state.consumedPoints >= table[limit].points)
				throw new TooMany(limit, Math.ceil(state.msBeforeNext / 1000));
		},
		count: async (limit: LimitName, key: string) => {
			// Beyond the limit the library rejects; the next check says so.
			await by[limit].consume(key).catch((fault: unknown) => {
				if (!(fault instanceof RateLimiterRes)) throw fault;
			});
		}
	});
};

const made = new WeakMap<object, RateLimits>();

/** The counters of a register, in memory. */
export const limitsOf = (register: object): RateLimits => {
	let found = made.get(register);
	if (!found) made.set(register, (found = rateLimits()));
	return found;
};

/** Neighbours share a count: IPv4 by /24, IPv6 by /48. */
export const network = (address: string): string => {
	const four = /(?:^|:)(\d+\.\d+\.\d+)\.\d+$/.exec(address);
	return four ? four[1]! : address.split(':').slice(0, 3).join(':');
};
