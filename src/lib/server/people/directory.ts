import { randomBytes } from 'node:crypto';
import { digestOf } from '$lib/chain/digest';
import { textFault } from '$lib/chain/text';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Conflict, Invalid, type Issue } from '$lib/domain/faults';
import type { Grant, StepUp } from '$lib/domain/entry';
import type { Ctx, People } from '$lib/server/context';
import type { Handle, Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { record } from '$lib/server/log/record';
import { byMail, directoryEntry, namesOf } from './people.queries';

/** What the directory holds of a person; none of it ever stands in the log. */
export interface Identity {
	readonly name: string;
	readonly mail: string;
	readonly staffNumber: string;
}

/** Names by id, for pages; an id the directory does not know keeps itself as its name. */
export const people = (read: Handle): People => ({
	names: (ids) => {
		const wanted = [...new Set(ids)];
		const found = wanted.length === 0 ? [] : read.all(namesOf(read.q, wanted));
		const names = new Map<string, string>(wanted.map((id) => [id, id === 'system' ? 'the register' : id]));
		for (const { id, name } of found) if (name !== '') names.set(id, name);
		return names;
	}
});

const mailForm = /^[^\s@"<>,;:()]{1,64}@[^\s@"<>,;:()]{1,190}$/;

/** Cleans what was typed and says what is wrong with it. @throws Invalid */
export const checkIdentity = (typed: Identity): Identity => {
	const clean = (text: string): string => text.normalize('NFC').trim().replace(/\s+/g, ' ');
	const identity = {
		name: clean(typed.name),
		mail: clean(typed.mail),
		staffNumber: clean(typed.staffNumber)
	};
	const issues: Issue[] = [];
	const wanted: Readonly<Record<string, string>> = {
		name: 'a name',
		mail: 'a mail address',
		staffNumber: 'a staff number'
	};
	for (const [field, text] of Object.entries(identity)) {
		const fault = textFault(text, 'name');
		if (fault) issues.push({ pointer: `/${field}`, message: `This ${fault}.` });
		else if (text === '') issues.push({ pointer: `/${field}`, message: `Write ${wanted[field]}.` });
		else if (text.length > 120) issues.push({ pointer: `/${field}`, message: 'At most 120 characters.' });
	}
	if (identity.mail !== '' && !mailForm.test(identity.mail))
		issues.push({ pointer: '/mail', message: 'Write one mail address, such as a.person@bank.example.' });
	if (issues.length > 0) throw new Invalid(issues);
	return Object.freeze(identity);
};

/** Gives a person an entry in the directory; name and address stay out of the log. @throws Conflict */
export const enterDirectory = (ctx: Ctx, tx: Tx, person: PersonId, identity: Identity): void => {
	if (identity.mail !== '' && tx.first(byMail(tx.q, identity.mail)))
		throw new Conflict('Another person has this mail address.');
	const { name, mail, staffNumber } = identity;
	tx.insert('person', {
		id: person,
		name,
		mail,
		staff_number: staffNumber,
		salt: randomBytes(32),
		handle: randomBytes(32)
	});
	if (name !== '')
		tx.insert('person_name', { person, name, from_at: ctx.now().toISOString(), until_at: null });
};

/** Names a person who had no name yet: the first admins name themselves. @throws Conflict */
export const nameInDirectory = (ctx: Ctx, tx: Tx, person: PersonId, identity: Identity): void => {
	const other = tx.first<Schema['person']>(byMail(tx.q, identity.mail));
	if (other && other.id !== person) throw new Conflict('Another person has this mail address.');
	const { name, mail, staffNumber } = identity;
	tx.update('person', { id: person }, { name, mail, staff_number: staffNumber });
	tx.insert('person_name', { person, name, from_at: ctx.now().toISOString(), until_at: null });
};

export const directoryOf = (handle: Handle, person: PersonId): Schema['person'] | undefined =>
	handle.first<Schema['person']>(directoryEntry(handle.q, person));

/** Binds an id to a name and staff number without telling them: SHA-256(salt ‖ name ‖ staff number). */
export const identityDigest = ({ salt, name, staff_number }: Schema['person']): string =>
	digestOf(Buffer.concat([salt, Buffer.from(name, 'utf8'), Buffer.from(staff_number, 'utf8')]));

/** Enters a person as invited. */
export const enterInvited = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	grant: Grant,
	person: PersonId,
	stepUp?: StepUp
): void => {
	record(ctx, tx, actor, grant, {
		type: 'person.invited',
		subjects: [person],
		payload: { person },
		...(stepUp ? { stepUp } : {})
	});
};

/** Enters that a person enrolled, under the identity the directory holds now. */
export const enterEnrolled = (ctx: Ctx, tx: Tx, actor: Actor, grant: Grant, person: PersonId): void => {
	const identity = identityDigest(directoryOf(tx, person)!);
	record(ctx, tx, actor, grant, {
		type: 'person.enrolled',
		subjects: [person],
		payload: { person, identity }
	});
};
