import type { RegisterLine } from '$lib/server/runs/register-table';

/** A page of the register as /api/v1/models answers it. */
export interface ModelsPage {
	readonly models: readonly RegisterLine[];
	readonly next?: string;
}

const shared = ['tier', 'owner', 'state', 'verdict', 'due'] as const;

/** The parameters of the page's address that the register is asked for. */
export const filterOf = (address: URLSearchParams): URLSearchParams => {
	const filter = new URLSearchParams();
	for (const name of shared) {
		const value = address.get(name);
		if (value) filter.set(name, value);
	}
	return filter;
};

/** `30 days`, `11 days over`, `today`. */
export const daysWords = (days: number): string => {
	if (days === 0) return 'today';
	const count = `${Math.abs(days)} ${Math.abs(days) === 1 ? 'day' : 'days'}`;
	return days < 0 ? `${count} over` : count;
};

/** A review is due soon within this many days. */
export const soon = 30;
