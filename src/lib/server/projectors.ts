import type { Projectors } from './context';
import { lineageProjectors } from './lineage/lineage.projectors';
import { policyProjectors } from './policy/policy.projectors';
import { authProjectors } from './auth/auth.projectors';
import { peopleProjectors } from './people/people.projectors';
import { registerProjectors } from './register/register.projectors';
import { runsProjectors } from './runs/runs.projectors';

/** What every event type does to the projected tables: one map for recording, replay, views of the past and `verify`. */
export const projectors: Projectors = {
	...authProjectors,
	...peopleProjectors,
	...policyProjectors,
	...registerProjectors,
	...lineageProjectors,
	...runsProjectors
};
