/** Tables of the runs room. */
// eslint-disable-next-line @typescript-eslint/no-empty-object-type -- filled with its migration
export interface RunsSchema {}
