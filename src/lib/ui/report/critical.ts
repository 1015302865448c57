/** What a statistic is held against: a critical value, two bounds, a declared range, a limit of the policy. */
import type { Check, Part } from '$lib/domain/run-result';
import { figure } from './figures';

export interface Critical {
	readonly text: string;
	/** What it is, where it is not the 5 % critical value of the column's head. */
	readonly note?: string;
	/** Parameters it was taken from: they need not be said twice. */
	readonly from?: readonly string[];
}

type Parameters = NonNullable<Part['parameters']>;

const number = (parameters: Parameters, key: string): number | undefined => {
	const value = parameters[key];
	return typeof value === 'number' ? value : undefined;
};

function fromParameters(parameters: Parameters): Critical | null {
	const [i0, i1] = [number(parameters, 'boundI0'), number(parameters, 'boundI1')];
	if (i0 !== undefined && i1 !== undefined)
		return {
			text: `${figure(i0)} · ${figure(i1)}`,
			note: 'all I(0) · all I(1)',
			from: ['boundI0', 'boundI1']
		};
	const [low, high] = [number(parameters, 'low'), number(parameters, 'high')];
	// The interval of a half-life is called low and high too, but has no declared counterpart.
	if (low !== undefined && high !== undefined && 'from' in parameters)
		return { text: `${figure(low)} to ${figure(high)}`, note: 'declared', from: ['low', 'high'] };
	const limit = number(parameters, 'limit');
	if (limit !== undefined) return { text: figure(limit), note: 'policy', from: ['limit'] };
	const declared = parameters['declared'];
	return typeof declared === 'string' ? { text: declared, note: 'declared', from: ['declared'] } : null;
}

/** The value to hold the statistic of a check or of one of its parts against; null where there is none. */
export function criticalOf(
	of: Pick<Check, 'criticalValues' | 'parameters' | 'parts' | 'statistic'> | Part
): Critical | null {
	const five = of.criticalValues?.find(({ level }) => level === '5%');
	if (five) return { text: figure(five.value) };
	const own = fromParameters(of.parameters ?? {});
	if (own || !('parts' in of)) return own;
	// The figure of the check is that of one of its parts.
	const part = of.parts?.find(({ about }) => about === of.statistic?.name);
	return part ? criticalOf(part) : null;
}
