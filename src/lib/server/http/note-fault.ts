import { randomBytes } from 'node:crypto';
import type { RequestEvent } from '@sveltejs/kit';

/** Writes one line of the server's log, without bodies, names or values, and returns the id people cite. */
export const noteFault = (fault: unknown, event: RequestEvent): string => {
	const id = randomBytes(6).toString('hex');
	const line = {
		at: new Date().toISOString(),
		level: 'error',
		error: id,
		request: event.locals.requestId,
		route: event.route.id,
		method: event.request.method,
		person: event.locals.actor?.person,
		fault: fault instanceof Error ? (fault.stack ?? fault.message) : String(fault)
	};
	process.stderr.write(`${JSON.stringify(line)}\n`);
	return id;
};
