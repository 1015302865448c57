import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { periodText, periodIndex, type Frequency } from '$lib/domain/period';

interface Column {
	readonly name: string;
	readonly decimals: number;
	readonly values: readonly number[];
}

/** Where an invented data file comes from: a longer file of the same source begins with the shorter one. */
export interface InventedSource {
	readonly frequency: Frequency;
	/** Periods of the first vintage. */
	readonly length: number;
	readonly columns: (n: number) => readonly Column[];
}

interface Wandering {
	readonly start: number;
	readonly centre: number;
	readonly sd: number;
	readonly memory: number;
	readonly pull: number;
	readonly drift?: number;
}

/** A driver that wanders: growth with memory, and a pull so weak that no test would see it. */
const wander = (
	seed: number,
	n: number,
	{ start, centre, sd, memory, pull, drift = 0 }: Wandering
): number[] => {
	const next = mulberry32(seed);
	const path = [start];
	let change = 0;
	for (let t = 1; t < n; t++) {
		const last = path[t - 1]!;
		change = drift + memory * (change - drift) - pull * (last - centre - drift * t) + sd * drawNormal(next);
		path.push(last + change);
	}
	return path;
};

interface Relation {
	/** Share of the gap closed in a period. */
	readonly speed: number;
	/** Long-run level given the drivers at t. */
	readonly target: (t: number) => number;
	/** Immediate response to the drivers' changes at t. */
	readonly impulse: (t: number) => number;
	readonly memory: number;
	readonly sd: number;
}

/** A bank variable that closes its gap to the long run. */
const follow = (seed: number, n: number, relation: Relation): number[] => {
	const next = mulberry32(seed);
	const path = [relation.target(0)];
	let change = 0;
	for (let t = 1; t < n; t++) {
		const gap = path[t - 1]! - relation.target(t - 1);
		change =
			-relation.speed * gap + relation.impulse(t) + relation.memory * change + relation.sd * drawNormal(next);
		path.push(path[t - 1]! + change);
	}
	return path;
};

const step = (path: readonly number[], t: number): number => path[t]! - path[t - 1]!;

/** Retail loss rate and unemployment: the relation holds throughout. */
export const retailLosses: InventedSource = {
	frequency: 'quarterly',
	length: 91,
	columns: (n) => {
		const jobless = wander(20412, n, { start: 6.1, centre: 6, sd: 0.24, memory: 0.45, pull: 0.012 });
		const loss = follow(20413, n, {
			speed: 0.28,
			target: (t) => 0.9 + 0.5 * jobless[t]!,
			impulse: (t) => 0.3 * step(jobless, t),
			memory: 0.15,
			sd: 0.085
		});
		return [
			{ name: 'loss_rate', decimals: 3, values: loss },
			{ name: 'unemployment', decimals: 2, values: jobless }
		];
	}
};

/** Small-business default rate and debt service: the long run shifts after two thirds of the sample. */
export const businessDefaults: InventedSource = {
	frequency: 'quarterly',
	length: 88,
	columns: (n) => {
		const service = wander(7704, n, { start: 11, centre: 11.5, sd: 0.33, memory: 0.3, pull: 0.01 });
		const broken = 58;
		const rate = follow(7705, n, {
			speed: 0.35,
			target: (t) => (t < broken ? 0.2 + 0.21 * service[t]! : -1.2 + 0.47 * service[t]!),
			impulse: (t) => 0.1 * step(service, t),
			memory: 0.1,
			sd: 0.07
		});
		return [
			{ name: 'default_rate', decimals: 3, values: rate },
			{ name: 'debt_service', decimals: 2, values: service }
		];
	}
};

/** Mortgage arrears, unemployment and the mortgage rate. */
export const mortgageArrears: InventedSource = {
	frequency: 'quarterly',
	length: 84,
	columns: (n) => {
		const jobless = wander(55022, n, { start: 5.4, centre: 6, sd: 0.22, memory: 0.45, pull: 0.012 });
		const interest = wander(55023, n, { start: 4.6, centre: 4, sd: 0.24, memory: 0.3, pull: 0.012 });
		const arrears = follow(55024, n, {
			speed: 0.3,
			target: (t) => -1.1 + 0.31 * jobless[t]! + 0.22 * interest[t]!,
			impulse: (t) => 0.12 * step(jobless, t) + 0.04 * step(interest, t),
			memory: 0.1,
			sd: 0.055
		});
		return [
			{ name: 'arrears', decimals: 3, values: arrears },
			{ name: 'unemployment', decimals: 2, values: jobless },
			{ name: 'mortgage_rate', decimals: 2, values: interest }
		];
	}
};

/** Household deposits, income and the deposit spread; amounts, so that the model works in logarithms. */
export const householdDeposits: InventedSource = {
	frequency: 'quarterly',
	length: 80,
	columns: (n) => {
		const income = wander(91308, n, {
			start: 4.2,
			centre: 4.2,
			sd: 0.007,
			memory: 0.25,
			pull: 0,
			drift: 0.009
		});
		const spread = wander(91309, n, { start: 1.2, centre: 1.1, sd: 0.13, memory: 0.25, pull: 0.02 });
		const deposits = follow(91310, n, {
			speed: 0.24,
			target: (t) => 0.35 + 1.12 * income[t]! + 0.05 * spread[t]!,
			impulse: (t) => 0.35 * step(income, t),
			memory: 0.15,
			sd: 0.009
		});
		return [
			{ name: 'deposits', decimals: 3, values: deposits.map(Math.exp) },
			{ name: 'income', decimals: 3, values: income.map(Math.exp) },
			{ name: 'deposit_spread', decimals: 2, values: spread }
		];
	}
};

/** Corporate insolvency losses and the interest burden, once a year: too short for most tests. */
export const insolvencyLosses: InventedSource = {
	frequency: 'annual',
	length: 24,
	columns: (n) => {
		const burden = wander(3320, n, { start: 22, centre: 23, sd: 1.1, memory: 0.2, pull: 0.03 });
		const loss = follow(3321, n, {
			speed: 0.5,
			target: (t) => -0.6 + 0.062 * burden[t]!,
			impulse: (t) => 0.03 * step(burden, t),
			memory: 0,
			sd: 0.07
		});
		return [
			{ name: 'insolvency_loss', decimals: 3, values: loss },
			{ name: 'interest_burden', decimals: 2, values: burden }
		];
	}
};

/** The first `n` periods of a source as CSV bytes, the first of them named. */
export const csvOf = (source: InventedSource, first: string, n: number): Uint8Array => {
	const columns = source.columns(n);
	const start = periodIndex(first, source.frequency)!;
	const lines = [['period', ...columns.map(({ name }) => name)].join(',')];
	for (let t = 0; t < n; t++) {
		const cells = columns.map(({ values, decimals }) => values[t]!.toFixed(decimals));
		lines.push([periodText(start + t, source.frequency), ...cells].join(','));
	}
	return new TextEncoder().encode(`${lines.join('\r\n')}\r\n`);
};
