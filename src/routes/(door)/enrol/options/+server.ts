import { optionsForLink } from '$lib/server/people/enrolment';
import { optionsAtDoor } from '../../visitor';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async (event) => {
	const body: unknown = await event.request.json().catch(() => null);
	const text = (name: string): string => {
		const value = (body as Record<string, unknown> | null)?.[name];
		return typeof value === 'string' ? value.slice(0, 300) : '';
	};
	return optionsAtDoor(event, (visitor) =>
		optionsForLink(event.locals.ctx, visitor, text('secret'), text('name'))
	);
};
