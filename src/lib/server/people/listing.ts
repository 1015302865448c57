import type { Actor, PersonId, Role } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Handle } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { liveCredentials } from '$lib/server/auth/auth.queries';
import { allow, may } from './allow';
import { directory, everyone, grantsOf, holdersAt, openProposals, rolesOfEveryone } from './people.queries';
import type { State } from './standing';

export interface PersonRow {
	readonly person: PersonId;
	readonly name: string;
	readonly mail: string;
	readonly staffNumber: string;
	readonly state: State;
	readonly since: string;
	readonly roles: readonly Role[];
}

/** The directory with roles in force, by name. @throws Refused */
export const listPeople = (ctx: Ctx, actor: Actor): readonly PersonRow[] => {
	allow(ctx, ctx.read, actor, 'people.read');
	const { read } = ctx;
	const named = new Map(read.all<Schema['person']>(directory(read.q)).map((row) => [row.id, row]));
	const held = read.all(rolesOfEveryone(read.q, ctx.now().toISOString()));
	return read
		.all<Schema['person_state']>(everyone(read.q))
		.map(({ person, state, since }) => ({
			person: person as PersonId,
			name: named.get(person)?.name || 'not named yet',
			mail: named.get(person)?.mail ?? '',
			staffNumber: named.get(person)?.staff_number ?? '',
			state,
			since,
			roles: held.filter((one) => one.person === person).map(({ role }) => role as Role)
		}))
		.sort((a, b) => a.name.localeCompare(b.name, 'en'));
};

/** One person's row. @throws Refused, Absent */
export const personRow = (ctx: Ctx, actor: Actor, person: PersonId): PersonRow => {
	const row = listPeople(ctx, actor).find((one) => one.person === person);
	if (!row) throw new Absent('There is no such person.');
	return row;
};

export interface RoleHeld {
	readonly role: Role;
	readonly from: string;
	readonly until: string | null;
	readonly by: string;
	readonly entry: number;
}

/** Every role a person holds or held. @throws Refused */
export const rolesHeld = (ctx: Ctx, actor: Actor, person: PersonId): readonly RoleHeld[] => {
	allow(ctx, ctx.read, actor, 'people.read');
	const grants = ctx.read.all<Schema['role_grant']>(grantsOf(ctx.read.q, person));
	const names = ctx.people.names(grants.map(({ granted_by }) => granted_by as PersonId));
	return grants.map(({ role, from_at, until_at, granted_by, entry }) => ({
		role: role as Role,
		from: from_at,
		until: until_at,
		by: names.get(granted_by) ?? granted_by,
		entry
	}));
};

export interface Passkey {
	readonly id: string;
	readonly kind: 'passkey' | 'seat';
	readonly enrolledAt: string;
	/** Eligible for backup: a synced passkey. */
	readonly synced: boolean;
	/** Its counter did not rise once: perhaps a copied key. */
	readonly counterFell: boolean;
	/** The entry that enrolled it, or changed it last. */
	readonly entry: number;
}

/** Credentials as pages show them. */
export const shownPasskeys = (handle: Handle, person: PersonId): readonly Passkey[] =>
	handle.all<Schema['credential']>(liveCredentials(handle.q, person)).map((one) => ({
		id: one.id,
		kind: one.kind,
		enrolledAt: one.enrolled_at,
		synced: one.backup_eligible === 1,
		counterFell: one.counter_fell_at !== null,
		entry: one.entry
	}));

/** A person's credentials in use. @throws Refused */
export const passkeysOf = (ctx: Ctx, actor: Actor, person: PersonId): readonly Passkey[] => {
	allow(ctx, ctx.read, actor, 'people.read');
	return shownPasskeys(ctx.read, person);
};

/** Enrolled persons who hold a role, by name: for choosing one. */
export const personsWith = (ctx: Ctx, role: Role): readonly { person: PersonId; name: string }[] => {
	const ids = ctx.read
		.all(holdersAt(ctx.read.q, role, ctx.now().toISOString()))
		.map(({ person }) => person as PersonId);
	const names = ctx.people.names(ids);
	return ids
		.map((person) => ({ person, name: names.get(person) ?? person }))
		.sort((a, b) => a.name.localeCompare(b.name, 'en'));
};

export interface Proposal {
	readonly seq: number;
	readonly act: Schema['grant_proposal']['act'];
	readonly person: PersonId;
	readonly name: string;
	readonly role: Role | null;
	readonly by: string;
	readonly expires: string;
	/** Whether the reader could be the second admin. */
	readonly mayApprove: boolean;
}

/** Proposals that wait for a second admin; none for readers who may not see them. */
export const waitingProposals = (ctx: Ctx, actor: Actor): readonly Proposal[] => {
	if (!may(ctx, ctx.read, actor, 'people.read')) return [];
	const rows = ctx.read.all<Schema['grant_proposal']>(openProposals(ctx.read.q, ctx.now().toISOString()));
	const names = ctx.people.names(rows.flatMap(({ person, by }) => [person as PersonId, by as PersonId]));
	return rows.map(({ seq, act, person, role, by, expires_at }) => ({
		seq,
		act,
		person: person as PersonId,
		name: names.get(person) ?? person,
		role: role as Role | null,
		by: names.get(by) ?? by,
		expires: expires_at,
		mayApprove: may(ctx, ctx.read, actor, act === 'role.grant' ? 'role.approve' : act, {
			person: person as PersonId,
			first: by as PersonId,
			...(role === null ? {} : { role: role as Role })
		})
	}));
};
