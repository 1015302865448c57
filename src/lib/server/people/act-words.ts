import type { Act } from './acts';
import { needsTwo } from './acts';
import { roleWord } from '$lib/domain/roles';
import type { PersonId, Role } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';
import { proposalBySeq } from './people.queries';
import type { Beside } from './perform';
import type { Schema } from '$lib/server/db/schema';

const date = (instant: unknown): string => String(instant).slice(0, 16).replace('T', ' ') + ' UTC';

const twoDays = 'Another administrator must sign the same within 72 hours; until then nothing changes.';

/** Who and what a proposal is about, in words. */
const proposed = (ctx: Ctx, seq: number, name: (id: string) => string): readonly string[] => {
	const row = ctx.read.first<Schema['grant_proposal']>(proposalBySeq(ctx.read.q, seq));
	if (!row) return [];
	const signedFirst = `${name(row.by)} signed it first (E-${seq}); you sign the same statement as the second administrator.`;
	if (row.act === 'role.grant')
		return [`You grant ${name(row.person)} the role of ${roleWord(row.role as Role)}.`, signedFirst];
	if (row.act === 'person.re-enable') return [`You re-enable ${name(row.person)}.`, signedFirst];
	return [
		`You start the recovery of ${name(row.person)}: a link of 30 minutes with which a new passkey replaces every old one.`,
		signedFirst
	];
};

/** What an act says, one sentence a line, as the person who signs it reads it. */
export const actWords = (
	ctx: Ctx,
	act: Act,
	payload: Readonly<Record<string, unknown>>,
	beside: Beside = {}
): readonly string[] => {
	const named = (id: string): string => ctx.people.names([id as PersonId]).get(id) ?? id;
	const who = 'person' in act ? named(act.person) : '';
	switch (act.kind) {
		case 'invite':
			return [
				`You invite ${beside.identity?.name ?? ''} (${beside.identity?.mail ?? ''}, staff number ${beside.identity?.staffNumber ?? ''}).`,
				'They get a one-time link of three days that you hand over yourself. The invitation gives no role.'
			];
		case 'renew-invitation':
			return [`You make a new invitation link for ${who}; the old one dies.`];
		case 'grant':
			return needsTwo(act.role)
				? [`You propose to grant ${who} the role of ${roleWord(act.role)}.`, twoDays]
				: [`You grant ${who} the role of ${roleWord(act.role)}, from ${date(payload['from'])}.`];
		case 're-enable':
			return [`You propose to re-enable ${who}.`, twoDays];
		case 'recover':
			return [`You propose the recovery of ${who}, who lost every passkey.`, twoDays];
		case 'approve': {
			const recognised = payload['recognised'];
			const how = recognised === undefined ? [] : [`They were recognised ${String(recognised)}.`];
			return [...proposed(ctx, act.proposal, named), ...how];
		}
		case 'end-role':
			return [`You end the role of ${roleWord(act.role)} of ${who}, at once. Their sessions end.`];
		case 'disable':
			return [`You disable ${who}, at once. Their sessions end and their API tokens die.`];
		case 'end-sessions':
			return [`You end every session of ${who}.`];
		case 'revoke-passkey':
			return [`You revoke a passkey of ${who}. What it signed before stays valid.`];
		case 'renew-codes':
			return ['You get ten new recovery codes. The old ones die.'];
		case 'create-token':
			return [
				`You create an API token for “${beside.label ?? ''}” with the scopes ${act.scopes.join(', ')}.`,
				`It acts with your rights of the moment, until ${date(payload['expires'])}.`
			];
		case 'revoke-token':
			return [`You revoke the API token ${act.token} of ${who}.`];
	}
};
