/** Events of the runs room. */
export const runsEvents = {} as const;
