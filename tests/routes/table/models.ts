import type { Cast, Populated } from '../../support/populated';
import { admins, team, type Row } from '../row';

const models = '/(desk)/models';
const model = '/(desk)/models/[model=model]';

const list: readonly Row[] = [
	{ route: '/(desk)', method: 'GET', action: 'register.read', allowed: 200 },
	{ route: models, method: 'GET', action: 'register.read', allowed: 200 },
	{ route: `${models}/table.csv`, method: 'GET', action: 'register.read', allowed: 200 },
	{
		route: `${models}/new`,
		method: 'GET',
		action: 'model.register',
		allows: ['owner', 'otherOwner'],
		allowed: 200
	},
	{
		route: `${models}/new`,
		method: 'POST',
		action: 'model.register',
		allows: ['owner', 'otherOwner'],
		// The policy offers no such answer.
		send: () => ({
			form: {
				name: 'Another model',
				purpose: 'None.',
				portfolio: 'None.',
				uses: 'none',
				otherUse: '',
				materiality: '99',
				complexity: '1'
			}
		}),
		allowed: 400
	}
];

/** The form of a sheet; the policy offers no such answer. */
const edited = {
	form: {
		name: 'Another name',
		purpose: 'None.',
		portfolio: 'None.',
		uses: 'none',
		materiality: '99',
		complexity: '1'
	}
};

const sheet: readonly Row[] = [
	// Whoever may not read it whole sees its reference, name, tier and state.
	{ route: model, method: 'GET', action: 'model.read-header', allowed: 200, about: 'model' },
	{
		route: model,
		method: 'POST ?/edit',
		action: 'model.edit',
		send: () => edited,
		allows: team,
		allowed: 400,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/assign',
		what: 'somebody who holds no role',
		action: 'validation.assign',
		send: (_, { people }) => ({ form: { person: people.stranger } }),
		allows: ['head'],
		allowed: 400,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/assign',
		what: 'its owner',
		action: 'validation.assign',
		send: ({ model: ref }, { own, people }) => ({
			form: { person: ref === own.model ? people.owner : people.otherOwner }
		}),
		allows: [],
		rules: { head: 'S1' },
		allowed: 303,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/release',
		action: 'validation.release',
		send: (_, { people }) => ({ form: { person: people.otherValidator } }),
		allows: ['head'],
		// They do not validate it.
		allowed: 400,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/confirm',
		action: 'tier.confirm',
		// The answers give tier 2.
		send: () => ({ form: { tier: '3' } }),
		allows: ['validator'],
		allowed: 400,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/override',
		action: 'tier.override',
		send: () => ({ form: { tier: '2', reason: 'It is confirmed, not overridden.' } }),
		allows: ['validator'],
		allowed: 400,
		about: 'model'
	},
	{
		route: model,
		method: 'POST ?/agree',
		action: 'tier.override',
		allows: ['head'],
		allowed: 303,
		entersOnce: ['tier.overridden'],
		about: 'model'
	}
];

/** An admin appoints somebody, and signs; nothing is entered before that. */
const appointing = {
	route: model,
	method: 'POST ?/prepare',
	action: 'party.grant',
	allows: admins,
	allowed: 200,
	about: 'model'
} as const;

const appoint =
	(who: Cast, more: Readonly<Record<string, string>> = {}) =>
	(_: unknown, { people }: Populated) => ({
		form: { kind: 'start', relation: 'developer', person: people[who], ...more }
	});

const appointments: readonly Row[] = [
	{ ...appointing, what: 'appoint a developer', send: appoint('stranger') },
	{
		...appointing,
		what: 'appoint the head of model risk',
		send: appoint('head'),
		allows: [],
		rules: { admin: 'S4', secondAdmin: 'S4' }
	},
	{
		...appointing,
		what: 'appoint the admin',
		send: appoint('admin'),
		allows: [],
		rules: { admin: 'S6', secondAdmin: 'S4' }
	},
	{
		...appointing,
		what: 'end an owner who is none',
		action: 'party.end',
		send: ({ model: ref }, bank) => appoint('stranger', { kind: 'end', relation: 'owner' })(ref, bank),
		allowed: 400
	},
	{
		route: model,
		method: 'POST ?/sign',
		action: 'step-up',
		send: () => ({ form: { kind: 'start', challenge: 'AAAA', response: '{}' } }),
		allows: [],
		allowed: 403,
		rule: 'step-up',
		recovery: 'refuse',
		about: 'model',
		blind: true
	}
];

export const modelRows: readonly Row[] = [...list, ...sheet, ...appointments];
