/** Events of the people room. */
export const peopleEvents = {} as const;
