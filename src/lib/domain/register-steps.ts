import type { TransformStep } from './specification';

/** A chain of transforms as people type it: `ratio(balances), scale(100), log`; empty or `level` for none. */
export const stepsText = (steps: readonly TransformStep[]): string =>
	steps
		.map((step) => {
			switch (step.step) {
				case 'scale':
				case 'lag':
					return `${step.step}(${step.by})`;
				case 'ratio':
				case 'deflate':
					return `${step.step}(${step.column})`;
				case 'mean':
				case 'sum':
					return `${step.step}(${step.of})`;
				default:
					return step.step;
			}
		})
		.join(', ');

const plain = ['log', 'logit', 'diff', 'yoy', 'log-diff', 'log-yoy'] as const;
type Plain = (typeof plain)[number];

/** Offered in messages and hints. */
export const stepsHint =
	'level, or steps in order: log, logit, diff, yoy, log-diff, log-yoy, scale(100), ratio(column), deflate(column), mean(4), sum(4), lag(1)';

const whole = (text: string): number | undefined => (/^\d+$/.test(text) ? Number(text) : undefined);
const decimal = (text: string): number | undefined =>
	/^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i.test(text) ? Number(text) : undefined;

const oneStep = (typed: string): TransformStep | string => {
	const [, name, argument] = /^([a-z-]+)(?:\((.*)\))?$/u.exec(typed) ?? [];
	if (name === undefined) return `"${typed}" is no step: write ${stepsHint}.`;
	const given = argument?.trim();
	if (plain.includes(name as Plain))
		return given === undefined ? { step: name as Plain } : `${name} takes nothing in brackets.`;
	if (name === 'ratio' || name === 'deflate')
		return given ? { step: name, column: given } : `Name the column: ${name}(column).`;
	const number = given === undefined ? undefined : name === 'scale' ? decimal(given) : whole(given);
	if (name === 'scale')
		return number === undefined ? 'Write the factor: scale(100).' : { step: name, by: number };
	if (name === 'lag') return number === undefined ? 'Write the periods: lag(1).' : { step: name, by: number };
	if (name === 'mean' || name === 'sum')
		return number === undefined ? `Write the number of periods: ${name}(4).` : { step: name, of: number };
	return `"${typed}" is no step: write ${stepsHint}.`;
};

/** Commas part steps, those inside brackets belong to a column's name. */
const partsOf = (text: string): string[] =>
	text
		.split(/,(?![^(]*\))/)
		.map((part) => part.trim())
		.filter((part) => part !== '' && part !== 'level');

/** Reads a chain of transforms; `fault` says what is wrong with the first step that cannot be read. */
export const parseSteps = (text: string): { steps: TransformStep[]; fault?: string } => {
	const read = partsOf(text).map(oneStep);
	const fault = read.find((step) => typeof step === 'string');
	const steps = read.filter((step) => typeof step !== 'string');
	return { steps, ...(typeof fault === 'string' && { fault }) };
};

/** Reads lags such as `0, 2, 4` or `1-4`. */
export const parseLags = (text: string): { lags: number[]; fault?: string } => {
	const lags: number[] = [];
	for (const part of text.split(/[\s,;]+/).filter((each) => each !== '')) {
		const [, from, to] = /^(\d{1,2})(?:[-\u2013](\d{1,2}))?$/.exec(part) ?? [];
		if (from === undefined) return { lags: [], fault: `"${part}" is no lag: write 0, 1, 4 or 1-4.` };
		for (let lag = Number(from); lag <= Number(to ?? from); lag += 1) lags.push(lag);
	}
	return { lags };
};
