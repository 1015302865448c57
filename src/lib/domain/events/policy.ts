/** Events of the policy room. */
export const policyEvents = {} as const;
