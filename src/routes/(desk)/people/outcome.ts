import type { Outcome } from '$lib/server/people/perform';

/** What can be shown only once, as a page shows it. */
export type Shown = Exclude<Outcome, { kind: 'done' }>;
