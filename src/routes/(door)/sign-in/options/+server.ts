import { signInOptions } from '$lib/server/auth/options';
import { optionsAtDoor } from '../../visitor';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	optionsAtDoor(event, ({ holder }) => signInOptions(event.locals.ctx, holder));
