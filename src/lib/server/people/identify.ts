import type { RequestEvent } from '@sveltejs/kit';
import { system, type Actor, type PersonId } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { sessionCookie } from '$lib/server/auth/cookies';
import { endSession, sessionOf } from '$lib/server/auth/sessions';
import { presentedToken, tokenWithin } from '$lib/server/auth/tokens';
import { record } from '$lib/server/log/record';
import { seatsOffered } from './seats';
import { rolesOf, stateOf } from './standing';

type Asked = Pick<RequestEvent, 'cookies' | 'request' | 'locals' | 'url'>;

/** The actor behind an API token: its owner's rights of this moment, bounded by its scopes. */
export const actorOfToken = (ctx: Ctx, header: string, request: string): Actor | null => {
	const token = /^Bearer ([\x21-\x7e]{1,200})$/i.exec(header)?.[1];
	const found = token === undefined ? undefined : presentedToken(ctx, token);
	if (!found || stateOf(ctx.read, found.person) !== 'enrolled') return null;
	return Object.freeze({
		person: found.person,
		means: 'token',
		roles: rolesOf(ctx.read, found.person, ctx.now().toISOString()),
		token: found.id,
		scopes: found.scopes,
		request
	});
};

const ofSession = async (ctx: Ctx, token: string, request: string): Promise<Actor | null> => {
	const session = await sessionOf(ctx, token);
	if (!session) return null;
	const { person, means, hash } = session;
	const gone = stateOf(ctx.read, person) !== 'enrolled' || (means === 'seat' && !seatsOffered(ctx));
	if (gone) {
		endSession(ctx, hash, { person, means, roles: [], request }, 'disabled');
		return null;
	}
	// A recovery session holds no role: it may enrol a passkey and sign out.
	const roles = means === 'recovery' ? [] : rolesOf(ctx.read, person as PersonId, ctx.now().toISOString());
	return Object.freeze({ person, means, roles, session: hash, request });
};

/** A token that stands in an address was disclosed to every log on the way: it is revoked at once. */
const revokeDisclosed = (ctx: Ctx, url: URL, request: string): void => {
	const token = tokenWithin(url.pathname + url.search);
	const found = token === undefined ? undefined : presentedToken(ctx, token);
	if (!found) return;
	const { id, person } = found;
	ctx.write((tx) =>
		record(
			ctx,
			tx,
			system(request),
			{ rule: 'token.disclosed' },
			{ type: 'token.revoked', subjects: [person], payload: { person, token: id, reason: 'disclosed' } }
		)
	);
};

/** Who asks, by bearer token or by the session's cookie; roles and state are read on every request. */
export const identify = async (ctx: Ctx, { cookies, request, locals, url }: Asked): Promise<Actor | null> => {
	revokeDisclosed(ctx, url, locals.requestId);
	const header = request.headers.get('authorization');
	if (header !== null) return actorOfToken(ctx, header, locals.requestId);
	const token = cookies.get(sessionCookie(ctx.config).name);
	return token ? ofSession(ctx, token, locals.requestId) : null;
};
