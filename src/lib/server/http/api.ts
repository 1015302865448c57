import { json, type RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import type { Actor, Scope } from '$lib/domain/actor';
import { Invalid, Refused, type Issue } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import { answered } from './faults';
import { problem } from './problem';

const maxJson = 1024 * 1024;

/** An API call: the scope a token needs, the verb, and problem documents for what goes wrong. */
export const api = async (
	event: RequestEvent,
	work: (ctx: Ctx, actor: Actor) => unknown,
	{ scope }: { scope: Scope }
): Promise<Response> => {
	const { ctx, actor } = event.locals;
	if (!actor) return problem({ status: 401, title: 'Not signed in', detail: 'Send a bearer token.' });
	try {
		if (actor.means === 'token' && !actor.scopes?.includes(scope))
			throw new Refused('token-scope', `api:${scope}`, `This token does not hold the scope "${scope}".`);
		const result = await work(ctx, actor);
		return result instanceof Response ? result : json(result);
	} catch (fault) {
		return problem(answered(event, fault));
	}
};

const bad = (message: string): Invalid => new Invalid([{ pointer: '', message }]);

/** zod's issues as ours: a JSON pointer and a sentence each. */
export const issuesOf = (fault: z.ZodError): Issue[] =>
	fault.issues.map(({ path, message }) => ({
		pointer: path.map((key) => `/${String(key).replaceAll('~', '~0').replaceAll('/', '~1')}`).join(''),
		message
	}));

/** Reads a JSON body of at most 1 MiB against its schema. */
export const readJson = async <S extends z.ZodType>(event: RequestEvent, schema: S): Promise<z.output<S>> => {
	const type = event.request.headers.get('content-type')?.split(';')[0]?.trim();
	if (type !== 'application/json') throw bad('The body must be JSON, with content type application/json.');
	const text = await event.request.text();
	if (text.length > maxJson) throw bad('The body is over 1 MiB.');
	let value: unknown;
	try {
		value = JSON.parse(text);
	} catch (fault) {
		throw bad(`The body is not JSON: ${fault instanceof Error ? fault.message : 'unreadable'}`);
	}
	const parsed = schema.safeParse(value);
	if (!parsed.success) throw new Invalid(issuesOf(parsed.error));
	return parsed.data;
};
