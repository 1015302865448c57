import type { Actor, PersonId } from '$lib/domain/actor';
import { Absent, Invalid } from '$lib/domain/faults';
import { reference } from '$lib/domain/references';
import {
	modelEditSchema,
	modelInputSchema,
	taken,
	type ModelEdit,
	type ModelInput
} from '$lib/domain/register-input';
import type { TierAnswer } from '$lib/domain/tier';
import type { Policy } from '$lib/domain/policy';
import { compatible } from '$lib/domain/separation';
import { record } from '$lib/server/log/record';
import { allow } from '$lib/server/people/allow';
import { rolesOf, stateOf } from '$lib/server/people/standing';
import { adoptedPolicy } from '$lib/server/policy/policy';
import type { Ctx } from '../context';
import type { Handle } from '../db/handle';
import { countModels, modelByRef } from './register.queries';

const questions = ['materiality', 'complexity'] as const;

/** The scores as answers to the adopted policy's questions; an answer the policy does not offer is refused. */
const answersOf = (
	policy: Policy,
	scores: { readonly materiality?: number | undefined; readonly complexity?: number | undefined }
): TierAnswer[] =>
	questions.flatMap((question) => {
		const score = scores[question];
		if (score === undefined) return [];
		const offered = policy.questions.find(({ id }) => id === question)!.answers.map((answer) => answer.score);
		if (!offered.includes(score))
			throw new Invalid([
				{ pointer: `/${question}`, message: `Choose one of the policy's answers: ${offered.join(', ')}.` }
			]);
		return [{ question, score }];
	});

/** Developers are enrolled, and hold no role that keeps them apart from models (S4). */
const requireDevelopers = (ctx: Ctx, handle: Handle, persons: readonly PersonId[]): void => {
	persons.forEach((person, i) => {
		const refuse = (message: string): never => {
			throw new Invalid([{ pointer: `/developers/${i}`, message }]);
		};
		if (stateOf(handle, person) !== 'enrolled') refuse('This person is not enrolled in the register.');
		if (!compatible(rolesOf(handle, person, ctx.now().toISOString()), ['developer']))
			refuse('Admins, auditors and the head of model risk develop no models.');
	});
};

/**
 * Enters a model in the register, with its owner (the actor, unless an enrolled owner is named) and developers.
 * @returns its reference, `M-014`
 * @throws Invalid naming the field; Refused by the permission table
 */
export const registerModel = (ctx: Ctx, actor: Actor, input: ModelInput): string => {
	const { materiality, complexity, owner: named, ...said } = taken(modelInputSchema, input);
	return ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'model.register');
		const answers = answersOf(adoptedPolicy(ctx, tx).policy, { materiality, complexity });
		const owner = (named ?? actor.person) as PersonId;
		if (owner !== actor.person)
			throw new Invalid([
				{
					pointer: '/owner',
					message: 'Whoever registers a model owns it; an admin can appoint another owner.'
				}
			]);
		const developers = [...new Set(said.developers)].filter((person) => person !== owner) as PersonId[];
		requireDevelopers(ctx, tx, developers);
		const model = reference('model', (tx.first(countModels(tx.q))?.n ?? 0) + 1);
		record(ctx, tx, actor, grant, {
			type: 'model.registered',
			subjects: [model],
			payload: { model, ...said, owner, developers, answers }
		});
		return model;
	});
};

/**
 * Changes what a model's registration says. New answers change the tier proposed; a confirmed tier stands until a
 * validator confirms again.
 */
export const editModel = (ctx: Ctx, actor: Actor, model: string, input: ModelEdit): void => {
	const { materiality, complexity, ...said } = taken(modelEditSchema, input);
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'model.edit', { model });
		const row = tx.first(modelByRef(tx.q, model));
		if (!row) throw new Absent(`There is no model ${model}.`);
		const before = JSON.parse(row.answers) as TierAnswer[];
		const changed = answersOf(adoptedPolicy(ctx, tx).policy, { materiality, complexity });
		const answers = before.map(
			(answer) => changed.find(({ question }) => question === answer.question) ?? answer
		);
		record(ctx, tx, actor, grant, {
			type: 'model.edited',
			subjects: [model],
			payload: {
				model,
				...Object.fromEntries(Object.entries(said).filter(([, value]) => value !== undefined)),
				...(changed.length > 0 && { answers })
			}
		});
	});
};
