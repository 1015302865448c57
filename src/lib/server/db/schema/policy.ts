/** Tables of the policy room. */
// eslint-disable-next-line @typescript-eslint/no-empty-object-type -- filled with its migration
export interface PolicySchema {}
