/** Uses a form offers; others are typed. */
export const offeredUses = [
	'capital stress',
	'provisioning',
	'plan',
	'liquidity plan',
	'pricing',
	'recovery plan'
] as const;
