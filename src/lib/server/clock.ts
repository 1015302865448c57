export type Clock = () => Date;

/** Where a test harness that starts the built server leaves its own clock; no setting can reach it. */
const place = Symbol.for('keelbook.clock');

/** The one clock of the process. */
export const clock = (): Clock => (globalThis as { [place]?: Clock })[place] ?? ((): Date => new Date());
