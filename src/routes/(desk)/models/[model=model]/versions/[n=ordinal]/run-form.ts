import { z } from 'zod';

/** Rows for replaced settings that the form shows. */
export const settingRows = 3;

/** What the form that starts a run holds, as typed. */
export const runForm = z.object({
	vintage: z.string(),
	purpose: z.string(),
	seed: z.string(),
	setting: z.array(z.string()),
	value: z.array(z.string()),
	why: z.array(z.string())
});
export type RunForm = z.infer<typeof runForm>;

/** A value as typed: numbers, lists of numbers, else words. */
const typedValue = (text: string): number | string | number[] => {
	const parts = text.split(',').map((part) => part.trim().replace('\u2212', '-'));
	const numbers = parts.map(Number);
	if (parts.some((part) => part === '') || numbers.some((each) => !Number.isFinite(each))) return text;
	return numbers.length === 1 ? numbers[0]! : numbers;
};

/** The replaced settings of the rows in which a line was chosen. */
export const settingsOf = ({ setting, value, why }: RunForm) =>
	setting.flatMap((line, i) =>
		line === '' ? [] : [{ setting: line, value: typedValue(value[i] ?? ''), reason: why[i] ?? '' }]
	);
