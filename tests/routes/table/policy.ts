import { policyLines } from '$lib/domain/policy';
import { latestRelease } from '$lib/server/policy/released';
import { fieldNames } from '../../../src/routes/(desk)/policy/adopt/own-lines';
import { valueText } from '../../../src/routes/(desk)/policy/line-text';
import type { Row } from '../row';

const policy = '/(desk)/policy';
const adopt = `${policy}/adopt`;
const { digest, policy: released } = latestRelease();

const lines = Object.fromEntries(
	policyLines(released).flatMap(({ line }, n) => {
		const { value, reason } = fieldNames(n);
		return [
			[value, valueText(line.value)],
			[reason, 'As released.']
		];
	})
);

/** The head of model risk proposes a release, with the bank's word on each line. */
const proposing = {
	action: 'policy.adopt',
	allows: ['head'],
	search: () => `?release=${digest}`,
	send: () => ({ form: { ...lines, challenge: 'AAAA', response: '{}' } }),
	allowed: 200
} as const;

/** Nobody has signed: the signature is judged before anything else. */
const unsigned = {
	action: 'step-up',
	allows: [],
	allowed: 403,
	rule: 'step-up',
	recovery: 'refuse'
} as const;

export const policyRows: readonly Row[] = [
	{ route: policy, method: 'GET', action: 'policy.read', allowed: 200 },
	{
		route: policy,
		method: 'POST ?/prepare',
		action: 'policy.adopt',
		send: (_, { policyProposal }) => ({ form: { proposal: String(policyProposal) } }),
		// The head has signed first.
		allows: ['admin', 'secondAdmin'],
		allowed: 200
	},
	{
		route: policy,
		method: 'POST ?/sign',
		...unsigned,
		send: (_, { policyProposal }) => ({
			form: { proposal: String(policyProposal), challenge: 'AAAA', response: '{}' }
		})
	},
	{ route: adopt, method: 'GET', ...proposing },
	{ route: adopt, method: 'POST ?/prepare', ...proposing },
	{ route: adopt, method: 'POST ?/sign', ...proposing, ...unsigned }
];
