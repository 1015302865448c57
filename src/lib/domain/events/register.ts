/** Events of the register room. */
export const registerEvents = {} as const;
