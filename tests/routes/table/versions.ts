import { readers, team, type Row } from '../row';

const model = '/(desk)/models/[model=model]';
const signs = `${model}/signs`;
const drafting = `${model}/versions/new`;
const version = `${model}/versions/[n=ordinal]`;

/** What was typed comes back with a row more; nothing is read or stored. */
const echo = {
	action: 'register.read',
	allowed: 200,
	recovery: 'allow',
	about: 'model',
	blind: true
} as const;

const declaration = (side: string) => ({
	form: { side, series: 'unemp', sign: '+', low: '0.1', high: '1', rationale: 'As before.' }
});

const declaring: readonly Row[] = [
	{ route: signs, method: 'GET', action: 'model.read', allows: readers, allowed: 200, about: 'model' },
	{
		route: signs,
		method: 'POST ?/rows',
		...echo,
		send: () => ({ form: { edit: 'add' } })
	},
	{
		route: signs,
		method: 'POST ?/declare',
		what: 'as owner',
		action: 'driver.declare',
		send: () => declaration('owner'),
		allows: team,
		allowed: 303,
		enters: ['prior.declared'],
		about: 'model'
	},
	{
		route: signs,
		method: 'POST ?/declare',
		what: 'as validator',
		action: 'prior.declare',
		send: () => declaration('validator'),
		allows: ['validator'],
		allowed: 303,
		enters: ['prior.declared'],
		about: 'model'
	}
];

const specifying: readonly Row[] = [
	{
		route: drafting,
		method: 'GET',
		action: 'version.draft',
		allows: team,
		unread: 'model.read',
		allowed: 200,
		about: 'model'
	},
	{
		route: drafting,
		method: 'POST ?/edit',
		...echo,
		send: () => ({ form: { edit: 'series:add' } })
	},
	{
		route: drafting,
		method: 'POST ?/save',
		action: 'version.draft',
		// An empty specification.
		send: () => ({ form: { save: 'draft' } }),
		allows: team,
		allowed: 400,
		about: 'model'
	}
];

const versions: readonly Row[] = [
	{
		route: version,
		method: 'GET',
		action: 'version.read',
		allows: readers,
		others: 'hide',
		allowed: 200,
		about: 'model'
	},
	{
		route: `${version}/specification.json`,
		method: 'GET',
		action: 'version.read',
		allows: readers,
		others: 'hide',
		allowed: 200,
		about: 'model'
	},
	{
		route: version,
		method: 'POST ?/submit',
		action: 'version.submit',
		allows: ['owner'],
		n: ({ submitted }) => submitted,
		allowed: 409,
		about: 'model'
	},
	{
		route: version,
		method: 'POST ?/withdraw',
		action: 'version.withdraw',
		send: () => ({ form: { reason: 'It is of no use.' } }),
		allows: ['owner'],
		n: ({ withdrawn }) => withdrawn,
		allowed: 409,
		about: 'model'
	},
	...(
		[
			['planned', team, 409],
			['validation', ['validator'], 409],
			['exploratory', [...team, 'validator', 'head'], 400]
		] as const
	).map(([purpose, allows, allowed]): Row => ({
		route: version,
		method: 'POST ?/run',
		what: purpose,
		action: 'run.start',
		// Drafts are only explored, and not on data of nobody's.
		n: ({ draft }) => draft,
		send: () => ({ form: { vintage: 'D-9999/1', purpose, seed: '1' } }),
		allows,
		allowed,
		about: 'model'
	}))
];

export const versionRows: readonly Row[] = [...declaring, ...specifying, ...versions];
