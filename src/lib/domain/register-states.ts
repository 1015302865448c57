/** States of a version that the register room moves between; a decision adds its own. */
export const versionStates = ['draft', 'submitted', 'withdrawn'] as const;
export type VersionState = (typeof versionStates)[number];

/** From which states a step starts, and where it leads. */
export const versionSteps = {
	revise: { from: ['draft'], to: 'draft' },
	submit: { from: ['draft'], to: 'submitted' },
	withdraw: { from: ['draft', 'submitted'], to: 'withdrawn' }
} as const satisfies Record<string, { from: readonly VersionState[]; to: VersionState }>;
export type VersionStep = keyof typeof versionSteps;

/** Whether a version in that state can take the step. */
export const canStep = (state: VersionState, step: VersionStep): boolean =>
	(versionSteps[step].from as readonly VersionState[]).includes(state);

/** Why a step is not possible, as people read it. */
export const stepRefusal = (ref: string, state: VersionState, step: VersionStep): string => {
	if (state === 'submitted' && step === 'revise')
		return `${ref} was submitted and cannot change any more; draft the next version instead.`;
	if (state === 'withdrawn') return `${ref} was withdrawn.`;
	return `${ref} is ${state === 'draft' ? 'a draft' : state}: it cannot be ${step === 'submit' ? 'submitted' : step === 'revise' ? 'revised' : 'withdrawn'}.`;
};

interface VersionLine {
	readonly ordinal: number;
	readonly state: VersionState;
}

/** `2 submitted, 3 in draft`: the newest of each kind, oldest first; withdrawn ones only when there is nothing else. */
export const versionWords = (versions: readonly VersionLine[]): string => {
	const newest = (state: VersionState): VersionLine | undefined =>
		versions.filter((version) => version.state === state).at(-1);
	const shown = [newest('submitted'), newest('draft')].filter((version) => version !== undefined);
	const lines = shown.length ? shown : [newest('withdrawn')].filter((version) => version !== undefined);
	if (lines.length === 0) return 'no version yet';
	const word = { draft: 'in draft', submitted: 'submitted', withdrawn: 'withdrawn' } as const;
	return [...lines]
		.sort((a, b) => a.ordinal - b.ordinal)
		.map(({ ordinal, state }) => `${ordinal} ${word[state]}`)
		.join(', ');
};

export const modelStates = [
	'review overdue',
	'signs not declared',
	'no version yet',
	'in draft',
	'submitted',
	'withdrawn'
] as const;
export type ModelState = (typeof modelStates)[number];

/** The one state a list shows for a model: what most needs a person comes first. */
export const modelState = (model: {
	readonly overdue: boolean;
	readonly signsDeclared: boolean;
	readonly versions: readonly VersionLine[];
}): ModelState => {
	if (model.overdue) return 'review overdue';
	if (!model.signsDeclared) return 'signs not declared';
	const states = new Set(model.versions.map(({ state }) => state));
	if (states.size === 0) return 'no version yet';
	if (states.has('submitted')) return 'submitted';
	return states.has('draft') ? 'in draft' : 'withdrawn';
};
