import { randomBytes } from 'node:crypto';
import { redirect, type Handle, type HandleServerError, type ServerInit } from '@sveltejs/kit';
import { identify } from '$lib/server/people/identify';
import { register, start } from '$lib/server/boot';
import { guard } from '$lib/server/http/guard';
import { dress } from '$lib/server/http/headers';
import { noteFault } from '$lib/server/http/note-fault';

/** Every start-up check passes before the server listens. */
export const init: ServerInit = async () => {
	await start();
};

export const handle: Handle = async ({ event, resolve }) => {
	const ctx = register();
	event.locals.ctx = ctx;
	event.locals.requestId = randomBytes(8).toString('hex');
	const stopped = await guard(event, identify);
	if (stopped && 'location' in stopped) redirect(303, stopped.location);
	const response = stopped?.response ?? (await resolve(event));
	return dress(response, ctx.config.origin);
};

/** The one door of unexpected errors: an id for people, the rest for the server's log. */
export const handleError: HandleServerError = ({ error, event, status, message }) => {
	if (status === 404) return { message: 'There is no such page.' };
	return { message, errorId: noteFault(error, event) };
};
