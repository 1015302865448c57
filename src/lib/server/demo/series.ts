import { drawNormal, mulberry32 } from '$lib/econometrics/random/mulberry32';
import { periodText, periodIndex, type Frequency } from '$lib/domain/period';

/** An invented data file: periods down, one column a series. */
export interface InventedFile {
	readonly frequency: Frequency;
	readonly periods: readonly string[];
	readonly columns: readonly { readonly name: string; readonly decimals: number; readonly values: readonly number[] }[];
}

/** A driver that wanders: growth with memory, and a pull so weak that no test would see it. */
const wander = (
	next: () => number,
	n: number,
	{ start, centre, sd, memory = 0.3, pull = 0.01, drift = 0 }: Record<string, number> & { start: number; centre: number; sd: number }
): number[] => {
	const path = [start];
	let change = 0;
	for (let t = 1; t < n; t++) {
		const last = path[t - 1]!;
		change = drift! + memory! * (change - drift!) - pull! * (last - centre - drift! * t) + sd * drawNormal(next);
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
const follow = (next: () => number, n: number, relation: Relation): number[] => {
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

const periodsTo = (last: string, n: number, frequency: Frequency): string[] => {
	const end = periodIndex(last, frequency)!;
	return Array.from({ length: n }, (_, i) => periodText(end - n + 1 + i, frequency));
};

const step = (path: readonly number[], t: number): number => path[t]! - path[t - 1]!;

/** Retail loss rate and unemployment: the relation holds throughout. */
export const retailLosses = (last: string): InventedFile => {
	const n = 91;
	const next = mulberry32(20_411);
	const jobless = wander(next, n, { start: 6.1, centre: 6, sd: 0.24, memory: 0.45, pull: 0.012 });
	const loss = follow(next, n, {
		speed: 0.28,
		target: (t) => 0.9 + 0.5 * jobless[t]!,
		impulse: (t) => 0.3 * step(jobless, t),
		memory: 0.15,
		sd: 0.085
	});
	return {
		frequency: 'quarterly',
		periods: periodsTo(last, n, 'quarterly'),
		columns: [
			{ name: 'loss_rate', decimals: 3, values: loss },
			{ name: 'unemployment', decimals: 2, values: jobless }
		]
	};
};

/** Small-business default rate and debt service: the long run shifts after two thirds of the sample. */
export const businessDefaults = (last: string): InventedFile => {
	const n = 88;
	const next = mulberry32(7_703);
	const service = wander(next, n, { start: 11, centre: 11.5, sd: 0.33, memory: 0.3, pull: 0.01 });
	const broken = Math.floor(n * 0.66);
	const rate = follow(next, n, {
		speed: 0.35,
		target: (t) => (t < broken ? 0.2 + 0.21 * service[t]! : -1.2 + 0.47 * service[t]!),
		impulse: (t) => 0.1 * step(service, t),
		memory: 0.1,
		sd: 0.07
	});
	return {
		frequency: 'quarterly',
		periods: periodsTo(last, n, 'quarterly'),
		columns: [
			{ name: 'default_rate', decimals: 3, values: rate },
			{ name: 'debt_service', decimals: 2, values: service }
		]
	};
};

/** Mortgage arrears, unemployment and the mortgage rate. */
export const mortgageArrears = (last: string): InventedFile => {
	const n = 84;
	const next = mulberry32(55_021);
	const jobless = wander(next, n, { start: 5.4, centre: 6, sd: 0.22, memory: 0.45, pull: 0.012 });
	const interest = wander(next, n, { start: 4.6, centre: 4, sd: 0.24, memory: 0.3, pull: 0.012 });
	const arrears = follow(next, n, {
		speed: 0.3,
		target: (t) => -1.1 + 0.31 * jobless[t]! + 0.22 * interest[t]!,
		impulse: (t) => 0.12 * step(jobless, t) + 0.04 * step(interest, t),
		memory: 0.1,
		sd: 0.055
	});
	return {
		frequency: 'quarterly',
		periods: periodsTo(last, n, 'quarterly'),
		columns: [
			{ name: 'arrears', decimals: 3, values: arrears },
			{ name: 'unemployment', decimals: 2, values: jobless },
			{ name: 'mortgage_rate', decimals: 2, values: interest }
		]
	};
};

/** Household deposits, income and the deposit spread; amounts, so that the model works in logarithms. */
export const householdDeposits = (last: string): InventedFile => {
	const n = 80;
	const next = mulberry32(91_307);
	const income = wander(next, n, { start: 4.2, centre: 4.2, sd: 0.007, memory: 0.25, pull: 0, drift: 0.009 });
	const spread = wander(next, n, { start: 1.2, centre: 1.1, sd: 0.13, memory: 0.25, pull: 0.02 });
	const deposits = follow(next, n, {
		speed: 0.24,
		target: (t) => 0.35 + 1.12 * income[t]! + 0.05 * spread[t]!,
		impulse: (t) => 0.35 * step(income, t),
		memory: 0.15,
		sd: 0.009
	});
	return {
		frequency: 'quarterly',
		periods: periodsTo(last, n, 'quarterly'),
		columns: [
			{ name: 'deposits', decimals: 3, values: deposits.map(Math.exp) },
			{ name: 'income', decimals: 3, values: income.map(Math.exp) },
			{ name: 'deposit_spread', decimals: 2, values: spread }
		]
	};
};

/** Corporate insolvency losses and the interest burden, once a year: too short for most tests. */
export const insolvencyLosses = (last: string): InventedFile => {
	const n = 24;
	const next = mulberry32(3_319);
	const burden = wander(next, n, { start: 22, centre: 23, sd: 1.1, memory: 0.2, pull: 0.03 });
	const loss = follow(next, n, {
		speed: 0.5,
		target: (t) => -0.6 + 0.062 * burden[t]!,
		impulse: (t) => 0.03 * step(burden, t),
		memory: 0,
		sd: 0.07
	});
	return {
		frequency: 'annual',
		periods: periodsTo(last, n, 'annual'),
		columns: [
			{ name: 'insolvency_loss', decimals: 3, values: loss },
			{ name: 'interest_burden', decimals: 2, values: burden }
		]
	};
};

/** The file up to and with a period, as CSV bytes. */
export const csvOf = (file: InventedFile, to?: string): Uint8Array => {
	const rows = to === undefined ? file.periods.length : file.periods.indexOf(to) + 1;
	const lines = [['period', ...file.columns.map(({ name }) => name)].join(',')];
	for (let t = 0; t < rows; t++)
		lines.push(
			[file.periods[t]!, ...file.columns.map(({ values, decimals }) => values[t]!.toFixed(decimals))].join(',')
		);
	return new TextEncoder().encode(`${lines.join('\r\n')}\r\n`);
};
