import { optionsForLink } from '$lib/server/people/enrolment';
import { optionsAtDoor } from '../../visitor';
import type { RequestHandler } from './$types';

const longest = 300;

export const POST: RequestHandler = async (event) => {
	const body: unknown = await event.request.json().catch(() => null);
	const text = (name: string): string => {
		const value = (body as Record<string, unknown> | null)?.[name];
		return typeof value === 'string' && value.length <= longest ? value : '';
	};
	const identity = { name: text('name'), mail: text('mail'), staffNumber: text('staffNumber') };
	return optionsAtDoor(event, (visitor) =>
		optionsForLink(event.locals.ctx, visitor, {
			secret: text('secret'),
			password: text('password'),
			identity
		})
	);
};
