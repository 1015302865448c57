import { z } from 'zod';
import type { Actor, PersonId } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import { taken } from '$lib/domain/register-input';
import {
	confirmSigned,
	prepareStepUp,
	type Signed,
	type StepUpRequest,
	type ToSign
} from '$lib/server/auth/step-up';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import { rolesOf, stateOf } from '$lib/server/people/standing';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { developerCandidates, type Candidate } from './candidates';
import { partiesNow } from './register.queries';

const appointment = z.strictObject({
	model: z.string(),
	person: z.string().regex(/^p_[a-z2-7]{26}$/, 'Choose a person.'),
	relation: z.enum(['owner', 'developer'])
});
/** An owner or developer of a model, to be appointed or ended by an admin. */
export type Appointment = z.infer<typeof appointment>;

const change = { start: 'party.grant', end: 'party.end' } as const;
export type TeamChange = keyof typeof change;

const toSign = (kind: TeamChange, payload: Appointment): ToSign => ({
	action: change[kind],
	decision: kind === 'start' ? 'appoint' : 'end',
	subject: payload.model,
	payload
});

/** What must hold before and after the signature. */
const check = (
	ctx: Ctx,
	handle: Handle,
	kind: TeamChange,
	{ model, person, relation }: Appointment
): void => {
	const now = handle.all(partiesNow(handle.q, model)).filter((party) => party.relation === relation);
	const holds = now.some((party) => party.person === person);
	if (kind === 'end') {
		if (!holds) throw new Conflict(`This person is not ${relation} of ${model}.`);
		if (relation === 'owner' && now.length === 1)
			throw new Conflict(`${model} would have no owner: appoint the next one first.`);
		return;
	}
	if (holds) throw new Conflict(`This person is ${relation} of ${model} already.`);
	const roles = rolesOf(handle, person as PersonId, ctx.now().toISOString());
	if (stateOf(handle, person as PersonId) !== 'enrolled')
		throw new Invalid([{ pointer: '/person', message: 'This person is not enrolled in the register.' }]);
	if (relation === 'owner' && !roles.includes('owner'))
		throw new Invalid([{ pointer: '/person', message: 'This person does not hold the role of owner.' }]);
};

const grantFor = (
	ctx: Ctx,
	handle: Handle,
	actor: Actor,
	kind: TeamChange,
	{ model, person, relation }: Appointment
) => allow(ctx, handle, actor, change[kind], { model, person: person as PersonId, party: relation });

/** Builds the statement an admin signs to appoint or end an owner or developer. */
export const prepareTeamChange = (
	ctx: Ctx,
	actor: Actor,
	kind: TeamChange,
	input: Appointment
): Promise<StepUpRequest> => {
	const payload = taken(appointment, input);
	grantFor(ctx, ctx.read, actor, kind, payload);
	check(ctx, ctx.read, kind, payload);
	return prepareStepUp(ctx, actor, toSign(kind, payload));
};

/** Appoints or ends an owner or developer, as the admin signed it. */
export const changeTeam = (ctx: Ctx, actor: Actor, kind: TeamChange, signed: Signed): void => {
	const payload = taken(appointment, signed.payload);
	ctx.write((tx) => {
		const grant = grantFor(ctx, tx, actor, kind, payload);
		const stepUp = confirmSigned(ctx, tx, actor, signed, toSign(kind, payload));
		check(ctx, tx, kind, payload);
		record(ctx, tx, actor, grant, {
			type: kind === 'start' ? 'party.started' : 'party.ended',
			subjects: [payload.model, payload.person],
			payload,
			stepUp
		});
	});
};

/** The owners and developers of a model now, and who could be appointed, for the admin who appoints. */
export interface Team {
	readonly now: readonly {
		readonly person: string;
		readonly name: string;
		readonly relation: 'owner' | 'developer';
		readonly from: string;
	}[];
	readonly candidates: readonly Candidate[];
}

/** What the form that appoints people offers; only to those who may appoint. */
export const teamOf = (ctx: Ctx, actor: Actor, model: string): Team => {
	allow(ctx, ctx.read, actor, 'party.grant', { model });
	const rows = ctx.read.all(partiesNow(ctx.read.q, model));
	const names = ctx.people.names(rows.map(({ person }) => person as PersonId));
	return Object.freeze({
		now: rows.flatMap(({ person, relation, from_at }) =>
			relation === 'validator' ? [] : [{ person, name: names.get(person) ?? person, relation, from: from_at }]
		),
		candidates: developerCandidates(ctx, actor)
	});
};
