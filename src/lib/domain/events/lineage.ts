/** Events of the lineage room. */
export const lineageEvents = {} as const;
