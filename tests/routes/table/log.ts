import type { Row, Standing } from '../row';

/** Those who see the whole log, and those who see the entries of their own models. */
const whole: readonly Standing[] = ['validator', 'otherValidator', 'head', 'auditor'];
const some: readonly Standing[] = [...whole, 'owner', 'developer', 'otherOwner', 'otherDeveloper'];

const log = '/(desk)/log';
const entry = `${log}/[seq=seq]`;

/** An entry about a model of others is not there for who has a model of their own. */
const one = {
	method: 'GET',
	action: 'log.read',
	allows: [...whole, 'owner', 'developer'],
	but: { otherOwner: 'absent', otherDeveloper: 'absent' },
	allowed: 200,
	about: 'model',
	judgedFirst: true
} as const;

export const logRows: readonly Row[] = [
	{ route: log, method: 'GET', action: 'log.read', allows: some, allowed: 200 },
	{ route: `${log}/checkpoint.txt`, method: 'GET', action: 'log.read', allows: some, allowed: 200 },
	{ route: entry, ...one },
	{ route: `${entry}/entry.json`, ...one },
	{ route: `${entry}/proof.txt`, ...one }
];
