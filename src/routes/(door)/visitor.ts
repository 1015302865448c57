import { fail, json, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { Invalid } from '$lib/domain/faults';
import { doorCookie, sessionCookie } from '$lib/server/auth/cookies';
import { AuthFault } from '$lib/server/auth/fault';
import { limitsOf, network, TooMany } from '$lib/server/auth/limits';
import { randomText, secretHash } from '$lib/server/auth/secret';
import { notSignedIn, type Visitor } from '$lib/server/people/sign-in';

/** Who stands at the door: bound to this browser by a cookie of five minutes, which is set when it is missing. */
export const visitorOf = (event: RequestEvent, renew = false): Visitor => {
	const { name, options } = doorCookie(event.locals.ctx.config);
	let secret = event.cookies.get(name);
	if (!secret || renew) {
		secret ??= randomText(20);
		event.cookies.set(name, secret, options);
	}
	return {
		holder: secretHash(secret),
		address: event.getClientAddress(),
		agent: (event.request.headers.get('user-agent') ?? '').replace(/[^\x20-\x7e]/g, '').slice(0, 160),
		request: event.locals.requestId
	};
};

/** Puts the token of a new session into its cookie. */
export const letIn = (event: RequestEvent, token: string): void => {
	const { config } = event.locals.ctx;
	const session = sessionCookie(config);
	event.cookies.set(session.name, token, session.options);
	const door = doorCookie(config);
	event.cookies.delete(door.name, { path: door.options.path, secure: door.options.secure });
};

/** Takes the session's cookie back. */
export const letOut = (event: RequestEvent): void => {
	const { name, options } = sessionCookie(event.locals.ctx.config);
	event.cookies.delete(name, { path: options.path, secure: options.secure });
};

interface Said {
	readonly message: string;
}

const tooMany = (event: RequestEvent, fault: TooMany): void =>
	event.setHeaders({ 'retry-after': String(fault.after) });

/** The dialect of the door in forms: one sentence and one status for whatever failed, 429 for a limit. */
export const atDoor = async <T extends object>(
	event: RequestEvent,
	work: () => Promise<T>,
	sentence = notSignedIn
): Promise<T | ActionFailure<Said>> => {
	try {
		return await work();
	} catch (fault) {
		if (fault instanceof AuthFault) return fail(401, { message: sentence });
		if (!(fault instanceof TooMany)) throw fault;
		tooMany(event, fault);
		return fail(429, { message: fault.message });
	}
};

/** The same for the ceremonies' options, in JSON; how many an address may ask for is bounded. */
export const optionsAtDoor = async (
	event: RequestEvent,
	work: (visitor: Visitor) => Promise<object>,
	sentence = notSignedIn
): Promise<Response> => {
	const visitor = visitorOf(event, true);
	const limits = limitsOf(event.locals.ctx);
	try {
		await limits.check('challenges an address', network(visitor.address));
		await limits.count('challenges an address', network(visitor.address));
		return json(await work(visitor));
	} catch (fault) {
		if (fault instanceof AuthFault) return json({ message: sentence }, { status: 401 });
		if (fault instanceof Invalid)
			return json({ message: fault.message, issues: fault.issues }, { status: 400 });
		if (!(fault instanceof TooMany)) throw fault;
		tooMany(event, fault);
		return json({ message: fault.message }, { status: 429 });
	}
};

/** A text field of a form; empty when it is absent or a file. */
export const field = (data: FormData, name: string): string => {
	const value = data.get(name);
	return typeof value === 'string' ? value : '';
};
