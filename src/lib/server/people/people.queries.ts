import { sql, type Kysely } from 'kysely';
import type { PersonId } from '$lib/domain/actor';
import type { Schema } from '$lib/server/db/schema';

type Q = Kysely<Schema>;

export const personState = (q: Q, person: PersonId) =>
	q.selectFrom('person_state').selectAll().where('person', '=', person);

/** Roles a person holds at an instant. */
export const rolesAt = (q: Q, person: PersonId, at: string) =>
	q
		.selectFrom('role_grant')
		.select('role')
		.where('person', '=', person)
		.where('from_at', '<=', at)
		.where((e) => e.or([e('until_at', 'is', null), e('until_at', '>', at)]))
		.orderBy('role');

/** Grants of one role that are open at an instant. */
export const grantInForce = (q: Q, person: string, role: string, at: string) =>
	q
		.selectFrom('role_grant')
		.selectAll()
		.where('person', '=', person)
		.where('role', '=', role)
		.where((e) => e.or([e('until_at', 'is', null), e('until_at', '>', at)]));

/** Every grant a person ever had, newest first. */
export const grantsOf = (q: Q, person: PersonId) =>
	q.selectFrom('role_grant').selectAll().where('person', '=', person).orderBy('from_at', 'desc');

/** Enrolled persons who hold a role at an instant. */
export const holdersAt = (q: Q, role: string, at: string) =>
	q
		.selectFrom('role_grant')
		.innerJoin('person_state', 'person_state.person', 'role_grant.person')
		.select('role_grant.person as person')
		.distinct()
		.where('role', '=', role)
		.where('person_state.state', '=', 'enrolled')
		.where('from_at', '<=', at)
		.where((e) => e.or([e('until_at', 'is', null), e('until_at', '>', at)]));

export const everyone = (q: Q) => q.selectFrom('person_state').selectAll().orderBy('person');

export const rolesOfEveryone = (q: Q, at: string) =>
	q
		.selectFrom('role_grant')
		.select(['person', 'role'])
		.where('from_at', '<=', at)
		.where((e) => e.or([e('until_at', 'is', null), e('until_at', '>', at)]))
		.orderBy('role');

export const proposalBySeq = (q: Q, seq: number) =>
	q.selectFrom('grant_proposal').selectAll().where('seq', '=', seq);

/** Proposals that still wait for the second admin at an instant. */
export const openProposals = (q: Q, at: string) =>
	q
		.selectFrom('grant_proposal')
		.selectAll()
		.where('outcome', 'is', null)
		.where('expires_at', '>', at)
		.orderBy('seq');

export const directoryEntry = (q: Q, person: PersonId) =>
	q.selectFrom('person').selectAll().where('id', '=', person);

export const directory = (q: Q) => q.selectFrom('person').select(['id', 'name', 'mail', 'staff_number']);

export const byMail = (q: Q, mail: string) =>
	q
		.selectFrom('person')
		.selectAll()
		.where(sql`lower(mail)`, '=', mail.toLowerCase());

export const enrolledSeats = (q: Q) =>
	q
		.selectFrom('credential')
		.select('person')
		.where('kind', '=', 'seat')
		.where('revoked_at', 'is', null)
		.orderBy('enrolled_at')
		.orderBy('entry');

export const namesOf = (q: Q, ids: readonly string[]) =>
	q
		.selectFrom('person')
		.select(['id', 'name'])
		.where('id', 'in', [...ids]);
