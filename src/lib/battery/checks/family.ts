import type { Check, Family } from '$lib/domain/run-result';
import { checkOf } from '../context';
import { sources } from '../sources';

/** How many of the alarms of a run chance explains; it judges no model. */
export const familyCheck = (family: Family): Check =>
	checkOf('family.false-alarms', {
		verdict: null,
		source: sources['family.false-alarms']!,
		parameters: {
			judged: family.judged,
			alarms: family.alarms,
			expected: family.expected,
			atLeastOne: family.atLeastOne
		},
		levels: ['query']
	});
