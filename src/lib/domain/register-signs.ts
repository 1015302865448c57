import type { Issue } from './faults';
import type { Sign, Specification } from './specification';

/** A declaration in force for a driver. */
export interface DeclaredSign {
	readonly series: string;
	readonly sign: Sign;
	readonly low: number;
	readonly high: number;
}

/** Every series whose effect the specification claims to know, in the order it names them. */
export const driversOf = (specification: Specification): readonly string[] => [
	...new Set([
		...specification.longRun.drivers.map(({ series }) => series),
		...specification.shortRun.drivers.map(({ series }) => series)
	])
];

/** Drivers of the specification for which nothing was declared. */
export const undeclared = (
	specification: Specification,
	declared: readonly DeclaredSign[]
): readonly string[] =>
	driversOf(specification).filter((driver) => !declared.some(({ series }) => series === driver));

const range = ({ sign, low, high }: Omit<DeclaredSign, 'series'>): string =>
	`${sign === '-' ? '\u2212' : sign}, ${low} to ${high}`;

/** Where a specification says another sign or range than was declared for a driver. */
export const signIssues = (
	specification: Specification,
	declared: readonly DeclaredSign[]
): readonly Issue[] => {
	const of = (name: string): DeclaredSign | undefined => declared.find(({ series }) => series === name);
	const long = specification.longRun.drivers.flatMap(
		({ series, sign, plausible: [low, high] }, i): Issue[] => {
			const said = of(series);
			if (!said || (said.sign === sign && said.low === low && said.high === high)) return [];
			const pointer = `/longRun/drivers/${i}/${said.sign === sign ? 'plausible' : 'sign'}`;
			const message = `For ${series} the declaration says ${range(said)}; the specification says ${range({ sign, low, high })}. Change one of them: a later declaration keeps both and is flagged.`;
			return [{ pointer, message }];
		}
	);
	const inLongRun = new Set(specification.longRun.drivers.map(({ series }) => series));
	const short = specification.shortRun.drivers.flatMap(({ series, sign }, i): Issue[] => {
		const said = of(series);
		// In the short run a driver of the long run may act the other way at first.
		if (!said || inLongRun.has(series) || said.sign === sign) return [];
		const message = `For ${series} the sign ${said.sign} was declared; the specification says ${sign}.`;
		return [{ pointer: `/shortRun/drivers/${i}/sign`, message }];
	});
	return [...long, ...short];
};
