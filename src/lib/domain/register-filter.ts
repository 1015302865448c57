import { z } from 'zod';
import { modelStates } from './register-states';

/** An empty choice of a form is no filter. */
const chosen = <S extends z.ZodType>(schema: S) =>
	z.preprocess((typed) => (typed === '' ? undefined : typed), schema.optional());

/** The readings of a model's newest run a list can be narrowed to; each means at least one such check. */
export const verdictFilters = ['fails', 'query', 'not assessable', 'no run'] as const;

/** Days ahead within which a review falls due; `overdue` is what lies behind. */
export const dueFilters = ['overdue', '30', '90', '180', '365'] as const;

/** How a list of models is narrowed: the parameters of its address. */
export const modelFilterSchema = z.object({
	tier: chosen(z.coerce.number<string>('A tier is a number.').int('A tier is a number.')),
	owner: chosen(z.string().max(200)),
	state: chosen(z.enum(modelStates, 'There is no such state.')),
	verdict: chosen(z.enum(verdictFilters, 'There is no such verdict.')),
	due: chosen(z.enum(dueFilters, 'Write overdue, 30, 90, 180 or 365.'))
});
export type ModelFilter = z.output<typeof modelFilterSchema>;

/** What the filter looks at; a model of which only the header is seen has none of the rest. */
export interface FilteredModel {
	readonly tier: number;
	readonly state: string;
	readonly whole?: { readonly owners: readonly string[]; readonly due?: { readonly days: number } };
	readonly latest?: { readonly query: number; readonly fails: number; readonly notAssessable: number };
}

const matchesVerdict = ({ whole, latest }: FilteredModel, verdict: ModelFilter['verdict']): boolean => {
	switch (verdict) {
		case undefined:
			return true;
		case 'fails':
			return (latest?.fails ?? 0) > 0;
		case 'query':
			return (latest?.query ?? 0) > 0;
		case 'not assessable':
			return (latest?.notAssessable ?? 0) > 0;
		case 'no run':
			return whole !== undefined && latest === undefined;
	}
};

const matchesDue = ({ whole }: FilteredModel, due: ModelFilter['due']): boolean => {
	if (due === undefined) return true;
	const days = whole?.due?.days;
	if (days === undefined) return false;
	return due === 'overdue' ? days < 0 : days <= Number(due);
};

/** Whether a model passes every filter that is set. */
export const matchesFilter = (model: FilteredModel, filter: ModelFilter): boolean =>
	(filter.tier === undefined || model.tier === filter.tier) &&
	(filter.owner === undefined || (model.whole?.owners.includes(filter.owner) ?? false)) &&
	(filter.state === undefined || model.state === filter.state) &&
	matchesVerdict(model, filter.verdict) &&
	matchesDue(model, filter.due);
