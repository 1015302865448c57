/** What a statistic is held against: a critical value, two bounds, a declared range, a limit of the policy. */
import type { Check, Part } from '$lib/domain/run-result';
import { reading, typed } from './figures';

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

/** The two bounds of a statistic; a part has its own, a check those of the part its figure comes from. */
function bounds(parameters: Parameters): Critical | null {
	const [i0, i1] = [number(parameters, 'boundI0'), number(parameters, 'boundI1')];
	if (i0 === undefined || i1 === undefined) return null;
	return {
		text: `${reading(i0)} · ${reading(i1)}`,
		note: 'all I(0) · all I(1)',
		from: ['boundI0', 'boundI1']
	};
}

function limits(parameters: Parameters): Critical | null {
	const [low, high] = [number(parameters, 'low'), number(parameters, 'high')];
	// The interval of a half-life is called low and high too, but has no declared counterpart.
	if (low !== undefined && high !== undefined && 'from' in parameters)
		return { text: `${reading(low)} to ${reading(high)}`, note: 'declared', from: ['low', 'high'] };
	const limit = number(parameters, 'limit');
	if (limit !== undefined) return { text: reading(limit), note: 'policy', from: ['limit'] };
	const declared = parameters['declared'];
	return typeof declared === 'string'
		? { text: typed(declared), note: 'declared', from: ['declared'] }
		: null;
}

const fivePercent = (of: Check | Part): Critical | null => {
	const five = of.criticalValues?.find(({ level }) => level === '5%');
	return five ? { text: reading(five.value) } : null;
};

/** What the statistic of a part is held against; null where there is nothing. */
export const criticalOfPart = (part: Part): Critical | null =>
	fivePercent(part) ?? bounds(part.parameters ?? {}) ?? limits(part.parameters ?? {});

/** What the statistic of a check is held against; null where there is nothing. */
export function criticalOf(check: Check): Critical | null {
	const part = check.parts?.find(({ about }) => about === check.statistic?.name);
	return fivePercent(check) ?? limits(check.parameters) ?? (part ? criticalOfPart(part) : null);
}
