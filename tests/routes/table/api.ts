import { readers, standings, team, unseen, type Row } from '../row';
import { lossOnUnemployment } from '../../domain/specification-example';

const v1 = '/api/v1';
const model = `${v1}/models/[model=model]`;
const vintage = `${v1}/vintages/[dataset=dataset]/[n=ordinal]`;
const run = `${v1}/runs/[run=run]`;

const read = { method: 'GET', scope: 'read', allowed: 200 } as const;
const hidden = { ...read, allows: readers, others: 'hide', about: 'model' } as const;

const registering: Row = {
	route: `${v1}/models`,
	method: 'POST',
	scope: 'write',
	action: 'model.register',
	allows: ['owner', 'otherOwner'],
	// The policy offers no such answer.
	send: () => ({
		json: {
			name: 'One',
			purpose: 'None.',
			portfolio: 'None.',
			uses: ['none'],
			materiality: 99,
			complexity: 1
		}
	}),
	allowed: 400
};

const declaring = (side: 'owner' | 'validator') => ({
	route: `${model}/signs`,
	method: 'POST' as const,
	what: `as ${side}`,
	scope: 'data' as const,
	send: () => ({
		json: {
			side,
			drivers: [{ series: 'unemp', sign: '+', low: 0.1, high: 1, rationale: 'As before.' }]
		}
	}),
	allowed: 201,
	enters: ['prior.declared'],
	about: 'model' as const
});

const drafting = {
	route: `${model}/versions`,
	method: 'POST',
	scope: 'data',
	action: 'version.draft',
	allows: team,
	allowed: 400,
	about: 'model'
} as const;

/** Who may not draft is refused that; a developer drafts, and does not submit. */
const drafted = Object.fromEntries(
	standings
		.filter((standing) => !team.includes(standing))
		.map((standing) => [standing, 'version.draft' as const])
);

/** Its range is not the one declared. */
const undeclared = lossOnUnemployment({
	longRun: {
		drivers: [{ series: 'unemp', sign: '+', plausible: [0.2, 2], rationale: 'Losses follow unemployment.' }],
		constant: true,
		trend: false
	}
});

const writing: readonly Row[] = [
	{ ...declaring('owner'), action: 'driver.declare', allows: team },
	{
		...declaring('validator'),
		action: 'prior.declare',
		allows: ['validator'],
		tokenRules: { data: 'S9', every: 'S9' }
	},
	{
		...drafting,
		what: 'a draft that gives no reason',
		send: () => ({ json: { specification: lossOnUnemployment(), draft: true } })
	},
	{
		...drafting,
		what: 'a submission against what was declared',
		action: 'version.submit',
		actions: drafted,
		allows: ['owner'],
		send: () => ({ json: { specification: undeclared, reason: 'Another range.' } }),
		tokenRules: { data: 'scope' }
	},
	{
		route: `${model}/vintages`,
		method: 'POST',
		scope: 'data',
		action: 'dataset.store',
		allows: team,
		send: ({ upload, sha256 }) => ({
			json: {
				upload,
				sha256,
				name: 'Next figures',
				vintageDate: '2026-01-31',
				columns: [{ column: 'loss', role: 'observed', unit: '%', source: 'invented' }]
			}
		}),
		// The desk has thrown the upload away.
		allowed: 409,
		about: 'model'
	},
	{
		route: `${v1}/uploads`,
		method: 'POST',
		scope: 'data',
		action: 'dataset.store',
		allows: team,
		search: ({ model: ref }) => `?model=${ref}&name=empty.csv`,
		send: () => ({ text: '' }),
		allowed: 400,
		enters: ['upload.refused'],
		about: 'model'
	}
];

const runs: readonly Row[] = (
	[
		['planned', team],
		['validation', ['validator']],
		['exploratory', [...team, 'validator', 'head']]
	] as const
).map(([purpose, allows]): Row => ({
	route: `${model}/runs`,
	method: 'POST',
	what: purpose,
	scope: 'run',
	action: 'run.start',
	// The version was withdrawn.
	send: ({ model: ref, withdrawn, dataset }) => ({
		json: { version: `${ref}/${withdrawn}`, vintage: `${dataset}/1`, purpose }
	}),
	allows,
	allowed: 409,
	about: 'model'
}));

export const apiRows: readonly Row[] = [
	{ route: `${v1}/models`, ...read, action: 'register.read' },
	registering,
	{ route: model, ...read, action: 'model.read-header', about: 'model' },
	{ route: `${model}/signs`, ...read, action: 'model.read', allows: readers, about: 'model' },
	{ route: `${model}/versions`, ...hidden, action: 'version.read' },
	{ route: `${model}/vintages`, ...hidden, action: 'data.read' },
	...writing,
	...runs,
	{ route: `${v1}/versions/[model=model]/[n=ordinal]`, ...hidden, action: 'version.read' },
	{ route: vintage, ...hidden, action: 'data.read', recovery: 'hide', partFirst: true },
	{ route: `${vintage}/file`, ...hidden, action: 'data.read', recovery: 'hide' },
	{ route: `${v1}/runs`, ...read, action: 'register.read' },
	{
		route: `${v1}/runs`,
		what: 'of one model',
		...hidden,
		action: 'run.read',
		search: ({ model: ref }) => `?model=${ref}`,
		lists: true
	},
	{ route: run, ...hidden, action: 'run.read' },
	{ route: `${run}/result`, ...hidden, action: 'run.read' },
	{
		route: `${run}/cancel`,
		method: 'POST',
		scope: 'run',
		action: 'run.cancel',
		allows: ['owner', 'validator', 'head'],
		...unseen,
		// It has ended.
		allowed: 409,
		about: 'model'
	},
	{
		route: `${v1}/log`,
		...read,
		action: 'log.read',
		but: { admin: 'refuse', secondAdmin: 'refuse', stranger: 'refuse' }
	},
	{
		route: `${v1}/log/checkpoint`,
		...read,
		action: 'log.read',
		but: { admin: 'refuse', secondAdmin: 'refuse', stranger: 'refuse' }
	}
];
