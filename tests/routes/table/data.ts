import { readers, team, type Row } from '../row';

const ofModel = '/(desk)/models/[model=model]/data';
const preview = `${ofModel}/preview`;
const dataset = '/(desk)/data/[dataset=dataset]';
const vintage = `${dataset}/[n=ordinal]`;

const reading = {
	method: 'GET',
	action: 'data.read',
	allows: readers,
	others: 'hide',
	allowed: 200,
	about: 'model'
} as const;

/** A dataset is open to the readers of any model that uses it: in recovery there is none. */
const shared = { ...reading, recovery: 'hide' } as const;

const storing = { action: 'dataset.store', allows: team, about: 'model' } as const;

/** A file waits for the one who sent it. */
const waits = { finds: { developer: 409 } } as const;

const sender = ({ upload }: { upload: string }): string => `?upload=${upload}`;

export const dataRows: readonly Row[] = [
	{ route: '/(desk)/data', method: 'GET', action: 'register.read', allowed: 200 },
	{ route: '/(desk)/data/series.csv', method: 'GET', action: 'register.read', allowed: 200 },
	{ route: dataset, ...shared },
	{ route: vintage, ...shared, partFirst: true },
	{ route: `${vintage}/file`, ...shared },
	{ route: `${vintage}/table.csv`, ...shared, partFirst: true },
	{ route: ofModel, ...reading },
	{
		route: ofModel,
		method: 'POST ?/upload',
		...storing,
		send: () => ({ file: { name: 'empty.csv', text: '' } }),
		allowed: 400,
		enters: ['upload.refused']
	},
	{
		route: ofModel,
		method: 'POST ?/attach',
		what: 'a dataset it uses already',
		...storing,
		send: ({ dataset: ref }) => ({ form: { dataset: ref } }),
		allowed: 409
	},
	{
		route: ofModel,
		method: 'POST ?/attach',
		what: 'a dataset of a model one may not read',
		...storing,
		// Refused for reading; for storing, whoever is not of the team.
		action: 'dataset.store',
		actions: { owner: 'data.read', developer: 'data.read' },
		but: { owner: 'hide', developer: 'hide' },
		allowed: 303,
		send: ({ model }, { own, other }) => ({
			form: { dataset: model === own.model ? other.dataset : own.dataset }
		})
	},
	{
		route: preview,
		method: 'GET',
		...storing,
		search: sender,
		...waits,
		allowed: 200
	},
	{
		route: preview,
		method: 'GET',
		what: 'a file that does not wait',
		...storing,
		allowed: 409
	},
	{
		route: preview,
		method: 'POST ?/confirm',
		...storing,
		search: sender,
		// Nothing is said of the columns.
		send: ({ sha256 }) => ({ form: { sha256 } }),
		allowed: 400
	},
	{
		route: preview,
		method: 'POST ?/discard',
		what: 'a file that does not wait',
		...storing,
		allowed: 409
	},
	{ route: preview, method: 'POST ?/discard', ...storing, search: sender, ...waits, allowed: 303 }
];
