/** Tables of the people room. */
// eslint-disable-next-line @typescript-eslint/no-empty-object-type -- filled with its migration
export interface PeopleSchema {}
