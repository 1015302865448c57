/** The model beside the two cheaper ones it claims to beat: how each fits. */
import type { Companion, EquationEstimates, Estimates, FitStatistics } from '$lib/domain/run-result';
import { reasonWords } from '$lib/battery/words';

export interface FitRow {
	readonly name: string;
	/** What it explains: the change of the dependent variable, or its level. */
	readonly explains: string;
	readonly fit: FitStatistics | null;
	readonly refused?: string;
	readonly equation: EquationEstimates | null;
}

const names: Readonly<Record<Companion['kind'], readonly [name: string, explains: string]>> = {
	'differences-only': ['differences only', 'the change'],
	'levels-only': ['levels only', 'the level']
};

const companionRow = ({ kind, estimates, refused }: Companion): FitRow => ({
	name: names[kind][0],
	explains: names[kind][1],
	fit: estimates?.fit ?? null,
	equation: estimates,
	...(refused && { refused: `${reasonWords[refused.reason]} (${refused.detail})` })
});

export const fitRows = (estimates: Estimates | null, companions: readonly Companion[]): readonly FitRow[] => [
	...(estimates
		? [
				{
					name: 'this model',
					explains: 'the change',
					fit: estimates.equation.fit,
					equation: estimates.equation
				}
			]
		: []),
	...companions.map(companionRow)
];
