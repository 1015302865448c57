import { readers, team, unseen, type Row } from '../row';

const run = '/(desk)/runs/[run=run]';

const reading = {
	method: 'GET',
	action: 'run.read',
	allows: readers,
	others: 'hide',
	allowed: 200,
	about: 'model'
} as const;

/** The run has ended. Who may read it and no more is refused; the others are not told of it. */
const cancelling = {
	action: 'run.cancel',
	allows: ['owner', 'validator', 'head'],
	...unseen,
	allowed: 409,
	about: 'model'
} as const;

export const runRows: readonly Row[] = [
	{ route: '/(desk)/runs', method: 'GET', action: 'register.read', allowed: 200 },
	{
		route: '/(desk)/runs',
		what: 'of one model',
		...reading,
		search: ({ model }) => `?model=${model}`,
		lists: true
	},
	{ route: '/(desk)/runs', method: 'POST ?/cancel', ...cancelling, send: ({ run }) => ({ form: { run } }) },
	{ route: run, ...reading },
	{ route: `${run}/result.json`, ...reading },
	{ route: `${run}/series.csv`, ...reading, search: () => '?plot=level' },
	{
		route: '/(desk)/runs/compare',
		...reading,
		search: ({ run: ref }) => `?a=${ref}&b=${ref}`
	},
	{
		route: '/(desk)/runs/compare',
		what: 'with a run of another model',
		...reading,
		search: ({ run: ref }) => `?a=${ref}&b=${ref === 'R-0001' ? 'R-0002' : 'R-0001'}`,
		but: { owner: 'hide', developer: 'hide' }
	},
	{ route: run, method: 'POST ?/cancel', ...cancelling },
	...(
		[
			['planned', team],
			['validation', ['validator']],
			['exploratory', [...team, 'validator', 'head']]
		] as const
	).map(([purpose, allows]): Row => ({
		route: run,
		method: 'POST ?/rerun',
		what: purpose,
		action: 'run.start',
		send: () => ({ form: { purpose } }),
		allows,
		...unseen,
		unread: 'run.read',
		// Its version was withdrawn.
		allowed: 409,
		about: 'model'
	}))
];
