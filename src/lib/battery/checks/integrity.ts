import { isRefusal } from '$lib/econometrics/refusal';
import { isConstant } from '$lib/econometrics/regression/least-squares';
import { longestEqualChanges } from '$lib/domain/lineage-integrity';
import { linePath } from '$lib/domain/policy';
import type { Part } from '$lib/domain/run-result';
import { checkOf, type AnyCheck, type Context } from '../context';
import type { ModelSample } from '../sample';
import { sources } from '../sources';
import { worst } from '../verdict';

const id = 'data.integrity';

/** A raw column: runs of equal changes, and whether its series varies inside the sample. */
const columnPart = (
	context: Context,
	{ grid, sample }: ModelSample,
	series: { name: string; column: string }
): Part => {
	const values = grid.columns.get(series.column)!;
	const run = longestEqualChanges(
		values,
		values.map((_, i) => i)
	);
	const constant = isConstant(sample.series.get(series.name)!);
	const interpolated = run.changes > context.settings.number(linePath(id, 'interpolation'));
	return Object.freeze({
		about: series.name,
		statistic: { name: 'equal changes', value: run.changes },
		parameters: {
			constant,
			...(interpolated && { from: grid.periods[run.from]!, to: grid.periods[run.to]! })
		},
		verdict: constant ? 'fails' : interpolated ? 'query' : 'holds'
	});
};

/** Series complete and of one frequency, none constant, none that looks filled in by a straight line. */
export const dataIntegrity: AnyCheck = (context) => {
	const rest = { source: sources[id]!, lines: ['least', 'interpolation'] };
	const { sample, spec } = context;
	// What keeps the data from being read is the finding of this very check.
	if (isRefusal(sample))
		return checkOf(id, { ...rest, verdict: 'fails', detail: sample.detail, because: [sample.refused] });
	const parts = spec.series.map((series) => columnPart(context, sample, series));
	const verdict = worst(parts.map((part) => part.verdict!));
	return checkOf(id, {
		...rest,
		verdict: sample.shortened && verdict === 'holds' ? 'query' : verdict,
		because: sample.shortened ? ['sample-shortened'] : [],
		parameters: { from: sample.periods[0]!, to: sample.periods.at(-1)!, periods: sample.sample.T },
		parts,
		n: sample.sample.T
	});
};
