import type { Row } from './row';
import { apiRows } from './table/api';
import { dataRows } from './table/data';
import { doorRows, lastRows } from './table/door';
import { logRows } from './table/log';
import { modelRows } from './table/models';
import { peopleRows } from './table/people';
import { policyRows } from './table/policy';
import { runRows } from './table/runs';
import { versionRows } from './table/versions';

/** Who gets what at every route, in the order in which it is walked: what ends sessions comes last. */
export const table: readonly Row[] = [
	...peopleRows,
	...modelRows,
	...versionRows,
	...dataRows,
	...runRows,
	...policyRows,
	...logRows,
	...apiRows,
	...doorRows,
	...lastRows
];
