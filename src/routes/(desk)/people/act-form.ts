import { z } from 'zod';
import { roles, scopes, type PersonId } from '$lib/domain/actor';
import { Invalid } from '$lib/domain/faults';
import { recognitions, type Act } from '$lib/server/people/acts';
import type { Beside } from '$lib/server/people/perform';

const kinds = [
	'invite',
	'renew-invitation',
	'grant',
	're-enable',
	'recover',
	'approve',
	'end-role',
	'disable',
	'end-sessions',
	'revoke-passkey',
	'renew-codes',
	'create-token',
	'revoke-token'
] as const;

const personId = z.custom<PersonId>((value) => typeof value === 'string' && /^p_[a-z2-7]{26}$/.test(value));

/** One form for every act upon people: what an act does not need is not sent, and read as empty. */
export const actForm = z.object({
	kind: z.enum(kinds),
	person: z.string().max(40),
	role: z.enum(roles).optional(),
	proposal: z.coerce.number<number>().int().min(0).optional(),
	recognised: z.enum(recognitions).optional(),
	credential: z.string().max(1400),
	token: z.string().max(10),
	scopes: z.array(z.enum(scopes)),
	days: z.coerce.number<number>().int(),
	label: z.string().trim().max(80),
	name: z.string().max(200),
	mail: z.string().max(300),
	staffNumber: z.string().max(200)
});
export type ActForm = z.output<typeof actForm>;

const need = <T>(value: T | undefined, pointer: string, message: string): T => {
	if (value === undefined || value === '') throw new Invalid([{ pointer, message }]);
	return value;
};

const personOf = ({ person }: ActForm): PersonId => {
	const parsed = personId.safeParse(person);
	if (!parsed.success) throw new Invalid([{ pointer: '/person', message: 'Choose a person.' }]);
	return parsed.data;
};

/** The act a form speaks of. @throws Invalid when a part of it is missing */
export const actOf = (form: ActForm): Act => {
	switch (form.kind) {
		case 'invite':
			return { kind: 'invite' };
		case 'grant':
		case 'end-role':
			return { kind: form.kind, person: personOf(form), role: need(form.role, '/role', 'Choose a role.') };
		case 'approve': {
			const proposal = need(form.proposal, '/proposal', 'Choose a proposal.');
			return { kind: 'approve', proposal, ...(form.recognised ? { recognised: form.recognised } : {}) };
		}
		case 'revoke-passkey':
			return {
				kind: form.kind,
				person: personOf(form),
				credential: need(form.credential, '/credential', 'Choose a passkey.')
			};
		case 'create-token':
			return { kind: form.kind, person: personOf(form), scopes: form.scopes, days: form.days };
		case 'revoke-token':
			return {
				kind: form.kind,
				person: personOf(form),
				token: need(form.token, '/token', 'Choose a token.')
			};
		default:
			return { kind: form.kind, person: personOf(form) };
	}
};

/** What is typed beside the act and stays outside the log. */
export const besideOf = ({ kind, name, mail, staffNumber, label }: ActForm): Beside =>
	kind === 'invite' ? { identity: { name, mail, staffNumber } } : kind === 'create-token' ? { label } : {};

/** The form again, as hidden fields of the page that signs it. */
export const fieldsOf = (form: ActForm): { name: string; value: string }[] =>
	Object.entries(form).flatMap(([name, value]) =>
		(Array.isArray(value) ? value : [value])
			.filter((one) => one !== undefined && one !== '')
			.map((one) => ({ name, value: String(one) }))
	);
