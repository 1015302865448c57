import { randomBytes } from 'node:crypto';
import { system, type Actor, type PersonId, type Role } from '$lib/domain/actor';
import { Absent } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import { onLoopback } from '$lib/server/auth/cookies';
import { credentialPayload, enrolCredential } from '$lib/server/auth/credentials';
import { makeSeatKey } from '$lib/server/auth/seat-key';
import { newPersonId } from '$lib/server/auth/secret';
import { record } from '$lib/server/log/record';
import { allow } from './allow';
import { directoryOf, enterDirectory, enterEnrolled, enterInvited } from './directory';
import { enrolledSeats } from './people.queries';
import { rolesOf, stateOf } from './standing';

/** Seats exist only in a demo register on this very machine. */
export const seatsOffered = (ctx: Ctx): boolean => ctx.config.demo && onLoopback(ctx.config);

export interface NewSeat {
	readonly name: string;
	readonly roles: readonly Role[];
}

const enrolSeat = (ctx: Ctx, tx: Tx, { name, roles }: NewSeat): PersonId => {
	const actor = system('demo');
	const person = newPersonId();
	const number = String(100_000 + (randomBytes(4).readUInt32BE() % 900_000));
	const mail = `${name
		.normalize('NFD')
		.toLowerCase()
		.replace(/[^a-z]+/g, '.')}.${number}@demo.example`;
	enterDirectory(ctx, tx, person, { name, mail, staffNumber: number });
	const invite = allow(ctx, tx, actor, 'person.invite');
	enterInvited(ctx, tx, actor, invite, person);
	enterEnrolled(ctx, tx, actor, invite, person);
	const { handle } = directoryOf(tx, person)!;
	enrolCredential(
		ctx,
		tx,
		actor,
		invite,
		credentialPayload(person, 'seat', handle, makeSeatKey(tx, person)),
		0
	);
	for (const role of roles)
		record(ctx, tx, actor, allow(ctx, tx, actor, 'role.grant', { person, role }), {
			type: 'role.granted',
			subjects: [person],
			payload: { person, role, from: ctx.now().toISOString() }
		});
	return person;
};

/** Makes a demo seat: an invented person whose key the server holds. @throws Absent outside a demo register */
export const seedSeat = (ctx: Ctx, seat: NewSeat): PersonId => {
	if (!seatsOffered(ctx)) throw new Absent('There are no seats in this register.');
	return ctx.write((tx) => enrolSeat(ctx, tx, seat));
};

/** A seat acting without a browser, as the demo is made. */
export const seatActor = (ctx: Ctx, person: PersonId, request = 'demo'): Actor =>
	Object.freeze({
		person,
		means: 'seat',
		roles: rolesOf(ctx.read, person, ctx.now().toISOString()),
		session: `seat ${person}`,
		request
	});

/** A seat as the sign-in page offers it. */
export interface Seat {
	readonly person: PersonId;
	readonly name: string;
	readonly roles: readonly Role[];
}

/** The seats that can be taken, in the order they were made; none outside a demo register. */
export const listSeats = (ctx: Ctx): readonly Seat[] => {
	if (!seatsOffered(ctx)) return [];
	const at = ctx.now().toISOString();
	const ids = ctx.read.all(enrolledSeats(ctx.read.q)).map(({ person }) => person as PersonId);
	const names = ctx.people.names(ids);
	return ids
		.filter((person) => stateOf(ctx.read, person) === 'enrolled')
		.map((person) => ({ person, name: names.get(person) ?? person, roles: rolesOf(ctx.read, person, at) }));
};
