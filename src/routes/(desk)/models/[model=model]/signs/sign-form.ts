import { z } from 'zod';
import type { Issue } from '$lib/domain/faults';

/** The rows of the form, column by column, as typed. */
export const signForm = z.object({
	side: z.enum(['owner', 'validator']),
	series: z.array(z.string()),
	sign: z.array(z.string()),
	low: z.array(z.string()),
	high: z.array(z.string()),
	rationale: z.array(z.string())
});
export type SignForm = z.infer<typeof signForm>;

const columns = ['series', 'sign', 'low', 'high', 'rationale'] as const;

/** Rows in which something was typed, with their places. */
export const typedRows = (form: SignForm): number[] =>
	form.series.flatMap((_, i) => (columns.some((column) => column !== 'sign' && form[column][i]) ? [i] : []));

/** The declaration that the form's rows make. */
export const driversOf = (form: SignForm, rows: readonly number[]) =>
	rows.map((i) => ({
		series: form.series[i]!.trim(),
		sign: form.sign[i] as '+',
		// An empty number would read as zero.
		low: (form.low[i] || 'none').replace('\u2212', '-') as unknown as number,
		high: (form.high[i] || 'none').replace('\u2212', '-') as unknown as number,
		rationale: form.rationale[i]!
	}));

/** `/drivers/0/high` of the verb is `/high/2` of the form. */
export const issuesInForm = (issues: readonly Issue[], rows: readonly number[]): Issue[] =>
	issues.map((issue) => {
		const [, at, column] = /^\/drivers\/(\d+)\/(\w+)$/.exec(issue.pointer) ?? [];
		const row = at === undefined ? undefined : rows[Number(at)];
		return row === undefined || column === undefined ? issue : { ...issue, pointer: `/${column}/${row}` };
	});

/** Adds an empty row, `add`, or takes one out, `remove:2`. */
export const editRows = (form: SignForm, edit: string): SignForm => {
	const [verb, at] = edit.split(':');
	const change = (list: readonly string[]): string[] =>
		verb === 'add' ? [...list, ''] : list.filter((_, i) => String(i) !== at);
	return {
		...form,
		...(Object.fromEntries(columns.map((column) => [column, change(form[column])])) as Omit<SignForm, 'side'>)
	};
};
