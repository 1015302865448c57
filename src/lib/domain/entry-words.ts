import type { PersonId } from './actor';
import type { Entry } from './entry';
import type { EventType, Payload } from './events';
import { roleWord } from './roles';

/** A person's name, or what stands for it. */
export type NameOf = (id: PersonId | 'system' | 'cli') => string;

type Words = {
	readonly [T in EventType]: (payload: Payload<T>, name: (person: string) => string) => string;
};

const list = (items: readonly string[]): string =>
	items.length < 2 ? (items[0] ?? 'none') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;
const count = (n: number, noun: string): string => `${n} ${noun}${n === 1 ? '' : 's'}`;
const day = (instant: string): string => instant.slice(0, 10);

/** What people do in their own name is said without it. */
const own: Partial<Words> = {
	'person.enrolled': () => 'enrolled',
	'credential.enrolled': ({ kind }) => `enrolled a ${kind}`,
	'credential.revoked': () => 'revoked a passkey of their own',
	'password.set': () => 'set a password',
	'recovery-codes.made': ({ count: made }) => `made ${count(made, 'recovery code')}`,
	'recovery-code.used': ({ left }) => `used a recovery code; ${left} left`,
	'session.opened': () => 'signed in',
	'session.closed': ({ reason }) => (reason === 'signed out' ? 'signed out' : `left a session: ${reason}`),
	'sessions.ended': () => 'ended every session of their own',
	'token.created': ({ token, scopes }) => `made token ${token} for ${list(scopes)}`
};

/** What each event says in words; the actor is named before it. */
const words: Words = {
	'log.opened': ({ institution, demo }) =>
		`opened the log of ${institution}${demo ? ', a demo bank with invented data' : ''}`,
	'app.started': ({ version, node }) => `started program ${version} on Node ${node}`,

	'person.invited': ({ person }, name) => `invited ${name(person)}`,
	'invitation.renewed': ({ person }, name) => `made a new enrolment link for ${name(person)}`,
	'person.enrolled': ({ person }, name) => `enrolled ${name(person)}`,
	'person.disabled': ({ person }, name) => `disabled ${name(person)}`,
	'person.re-enabled': ({ person }, name) => `enabled ${name(person)} again`,
	'recovery.started': ({ person, recognised }, name) =>
		`started the recovery of ${name(person)}, recognised ${recognised}`,
	'grant.proposed': ({ act, person, role }, name) =>
		act === 'role.grant' && role
			? `proposed ${name(person)} as ${roleWord(role)}`
			: `proposed ${act === 'recovery.start' ? 'the recovery' : 'the return'} of ${name(person)}`,
	'grant.withdrawn': ({ proposal }) => `withdrew the proposal in E-${proposal}`,
	'role.granted': ({ person, role }, name) => `made ${name(person)} ${roleWord(role)}`,
	'role.ended': ({ person, role, until }, name) =>
		`ended the role of ${name(person)} as ${roleWord(role)} on ${day(until)}`,
	'credential.enrolled': ({ person, kind }, name) => `enrolled a ${kind} of ${name(person)}`,
	'credential.revoked': ({ person }, name) => `revoked a passkey of ${name(person)}`,
	'credential.counter-fell': ({ person }, name) =>
		`saw the counter of a passkey of ${name(person)} fall: it may have been copied`,
	'credential.backup-changed': ({ person }, name) =>
		`saw the backup state of a passkey of ${name(person)} change`,
	'password.set': ({ person }, name) => `set a password for ${name(person)}`,
	'recovery-codes.made': ({ person, count: made }, name) =>
		`made ${count(made, 'recovery code')} for ${name(person)}`,
	'recovery-code.used': ({ person, left }, name) => `used a recovery code of ${name(person)}; ${left} left`,
	'session.opened': ({ person }, name) => `signed in ${name(person)}`,
	'session.closed': ({ person, reason }, name) => `ended a session of ${name(person)}: ${reason}`,
	'sessions.ended': ({ person }, name) => `ended every session of ${name(person)}`,
	'sign-in.failed': ({ way, reason }) => `refused a sign-in by ${way}: ${reason}`,
	'access.refused': ({ action, rule, subject }) =>
		`was refused ${action}${subject ? ` on ${subject}` : ''} by rule ${rule}`,
	'token.created': ({ person, token, scopes }, name) =>
		`made token ${token} of ${name(person)} for ${list(scopes)}`,
	'token.revoked': ({ token, reason }) => `revoked token ${token}: ${reason}`,

	'policy.proposed': ({ release }) => `proposed policy ${release}`,
	'policy.adopted': ({ release }) => `adopted policy ${release}`,

	'model.registered': ({ model, name }) => `registered ${model}, ${name}`,
	'model.edited': ({ model, ...fields }) => `changed ${list(Object.keys(fields))} of ${model}`,
	'party.started': ({ model, person, relation }, name) => `named ${name(person)} ${relation} of ${model}`,
	'party.ended': ({ model, person, relation }, name) => `ended ${name(person)} as ${relation} of ${model}`,
	'tier.confirmed': ({ model, tier }) => `confirmed ${model} in tier ${tier}`,
	'tier.override-proposed': ({ model, tier, proposed }) =>
		`proposed tier ${tier} for ${model} instead of ${proposed}`,
	'tier.overridden': ({ model, tier }) => `put ${model} in tier ${tier} against the proposal`,
	'prior.declared': ({ model, side, drivers, late }) =>
		`declared as ${side} signs and ranges of ${list(drivers.map(({ series }) => series))} in ${model}${late ? ', late' : ''}`,
	'version.drafted': ({ version }) => `drafted ${version}`,
	'version.revised': ({ version }) => `revised the draft ${version}`,
	'version.submitted': ({ version }) => `submitted ${version}`,
	'version.withdrawn': ({ version }) => `withdrew ${version}`,

	'dataset.opened': ({ dataset, name, model }) => `opened ${dataset}, ${name}, for ${model}`,
	'dataset.attached': ({ dataset, model }) => `attached ${dataset} to ${model}`,
	'vintage.stored': ({ vintage, from, to, observations }) =>
		`stored ${vintage}: ${count(observations, 'observation')}, ${from} to ${to}`,
	'upload.refused': ({ model, code, issues }) =>
		`refused an upload for ${model}: ${code}, ${count(issues, 'finding')}`,

	'run.requested': ({ run, version, vintage, purpose }) =>
		`asked for ${run}, ${purpose === 'exploratory' ? 'an' : 'a'} ${purpose} run of ${version} on ${vintage}`,
	'run.finished': ({ run, checks }) =>
		`finished ${run}: ${checks.holds} hold, ${checks.query} query, ${checks.fails} fail, ${checks.notAssessable} not assessable`,
	'run.failed': ({ run, sentence }) => `ended ${run} without a result: ${sentence}`,
	'run.cancelled': ({ run }) => `cancelled ${run}`
};

/** What an entry says, as a clause that follows the actor's name. */
export const entryWords = (entry: Entry, name: NameOf): string => {
	const { person } = entry.payload as { readonly person?: string };
	const say = (person === entry.actor ? own[entry.type] : undefined) ?? words[entry.type];
	return say
		? (say as (payload: unknown, name: NameOf) => string)(entry.payload, name)
		: entry.type.replace('.', ' ');
};

/** Actor and clause as a sentence. */
export const entrySentence = (actor: string, clause: string): string =>
	`${actor.charAt(0).toUpperCase()}${actor.slice(1)} ${clause}.`;

/** Everybody an entry speaks of: its actor, and the ids in its subjects and payload. */
export const peopleIn = ({ actor, behalf, subjects, payload }: Entry): (PersonId | 'system' | 'cli')[] => [
	actor,
	...(behalf ? [behalf] : []),
	...(JSON.stringify([subjects, payload]).match(/p_[a-z2-7]{26}/g) ?? []).map((id) => id as PersonId)
];
