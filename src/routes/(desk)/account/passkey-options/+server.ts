import { json } from '@sveltejs/kit';
import { serve } from '$lib/server/http/serve';
import { optionsForPasskey } from '$lib/server/people/passkeys';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = (event) =>
	serve(event, async (ctx, actor) => json(await optionsForPasskey(ctx, actor)));
