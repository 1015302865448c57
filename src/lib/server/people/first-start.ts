import { system, type PersonId } from '$lib/domain/actor';
import { Conflict } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import { linkUrl, makeLink } from '$lib/server/auth/links';
import { newPersonId } from '$lib/server/auth/secret';
import { record } from '$lib/server/log/record';
import { allow } from './allow';
import { enterDirectory, enterInvited } from './directory';
import { everyone } from './people.queries';

/** An enrolment link for one of the first two admins, who will name themselves. */
export interface FirstLink {
	readonly person: PersonId;
	readonly url: string;
}

const firstAdmin = (ctx: Ctx, tx: Tx): FirstLink => {
	const actor = system('first-start');
	const person = newPersonId();
	enterDirectory(ctx, tx, person, { name: '', mail: '', staffNumber: '' });
	enterInvited(ctx, tx, actor, allow(ctx, tx, actor, 'person.invite'), person);
	record(ctx, tx, actor, allow(ctx, tx, actor, 'role.grant', { person, role: 'admin' }), {
		type: 'role.granted',
		subjects: [person],
		payload: { person, role: 'admin', from: ctx.now().toISOString() }
	});
	return Object.freeze({ person, url: linkUrl(ctx, makeLink(ctx, tx, person, 'first')) });
};

/**
 * The first start of an empty register: two admins, because one alone could never grant the second.
 * The links live 24 hours and die with use; they are returned once and stored nowhere.
 * @throws Conflict when the register already knows people
 */
export const firstLinks = (ctx: Ctx): readonly [FirstLink, FirstLink] =>
	ctx.write((tx) => {
		if (tx.first(everyone(tx.q))) throw new Conflict('The register already knows people.');
		return [firstAdmin(ctx, tx), firstAdmin(ctx, tx)] as const;
	});
