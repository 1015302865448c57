import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Actor, PersonId, Role, Scope } from '$lib/domain/actor';
import { scopes } from '$lib/domain/actor';
import { openRegister } from '$lib/server/boot';
import type { Config } from '$lib/server/config';
import type { Ctx } from '$lib/server/context';
import { openSession, type Limits } from '$lib/server/auth/sessions';
import { tokenIdIn } from '$lib/server/auth/tokens';
import { takeStepUp } from '$lib/server/auth/step-up';
import { storeUpload } from '$lib/server/lineage/upload';
import type { Act } from '$lib/server/people/acts';
import { perform, prepare, type Outcome } from '$lib/server/people/perform';
import { prepareProposal, proposePolicy } from '$lib/server/policy/adoption';
import { latestRelease } from '$lib/server/policy/released';
import { policyLines } from '$lib/domain/policy';
import { waitingProposals } from '$lib/server/people/listing';
import { assignValidator } from '$lib/server/register/parties';
import { changeTeam, prepareTeamChange } from '$lib/server/register/team';
import { proposeOverride } from '$lib/server/register/tier';
import { testClock } from './clock';
import { idOf, person } from './people';
import { modelStory } from './populated-model';

/** The people of the populated register, by what they are to model M-001; `otherOwner` owns M-002. */
export const castRoles = {
	owner: ['owner'],
	developer: [],
	validator: ['validator'],
	otherOwner: ['owner'],
	/** Validates M-002. */
	secondValidator: ['validator'],
	/** Validates nothing. */
	otherValidator: ['validator'],
	head: ['head'],
	auditor: ['auditor'],
	admin: ['admin'],
	secondAdmin: ['admin'],
	stranger: [],
	/** Stand as owner and validator of M-001, and hold the role no more. */
	formerOwner: ['owner'],
	formerValidator: ['validator'],
	/** Develops M-001, and was disabled. */
	leaver: ['owner']
} as const satisfies Record<string, readonly Role[]>;
export type Cast = keyof typeof castRoles;

/** References of one model and what belongs to it. */
export interface Subject {
	readonly model: string;
	/** Ordinals of its versions: submitted, draft, withdrawn. */
	readonly submitted: number;
	readonly draft: number;
	readonly withdrawn: number;
	readonly dataset: string;
	readonly run: string;
	/** Folio of the entry that registered the model. */
	readonly seq: number;
	/** A file of the owner's that waits to be confirmed. */
	readonly upload: string;
	readonly sha256: string;
}

export type TokenName = Scope | 'every' | 'leaver' | 'expired' | 'revoked';

/** A register on disk with people, sessions, tokens, two models and finished runs; nothing of it is a demo. */
export interface Populated {
	readonly data: string;
	readonly people: Readonly<Record<Cast, PersonId>>;
	/** Session tokens: one a person, and two of the owner that open nothing whole. */
	readonly sessions: Readonly<Record<Cast | 'expired' | 'recovery', string>>;
	/** API tokens of the owner by scope, and some with every scope: alive, over, revoked, of a person who was disabled. */
	readonly tokens: Readonly<Record<TokenName, string>>;
	readonly own: Subject;
	readonly other: Subject;
	/** Folio of the released policy with the bank's own reasons, proposed by `head`. */
	readonly policyProposal: number;
	/** Folio of a role proposed by `admin` for `stranger`, which waits for a second admin. */
	readonly proposal: number;
}

const minutesOfYears = 3 * 365 * 24 * 60;
/** Tests move the clock far; what they do not test must not end meanwhile. */
const long = { idle: minutesOfYears, absolute: minutesOfYears } as const;

/** An act upon people, signed by the actor's own key. */
const act = async (ctx: Ctx, actor: Actor, what: Act, beside = {}): Promise<Outcome> => {
	const { challenge } = await prepare(ctx, actor, what, beside);
	return perform(ctx, actor, what, await takeStepUp(ctx, actor, { challenge, response: '' }), beside);
};

const token = async (
	ctx: Ctx,
	owner: Actor,
	held: readonly Scope[] = scopes,
	days = 365
): Promise<string> => {
	const outcome = await act(
		ctx,
		owner,
		{ kind: 'create-token', person: idOf(owner), scopes: held, days },
		{ label: `for ${held.join(' and ')}` }
	);
	if (outcome.kind !== 'token') throw new Error('No token was made');
	return outcome.token;
};

const tokensOf = async (ctx: Ctx, owner: Actor, leaver: Actor): Promise<Populated['tokens']> => {
	const made: [TokenName, string][] = [];
	for (const scope of scopes) made.push([scope, await token(ctx, owner, [scope])]);
	// Made a day before the register is opened again.
	made.push(['every', await token(ctx, owner)], ['expired', await token(ctx, owner, scopes, 1)]);
	made.push(['leaver', await token(ctx, leaver)], ['revoked', await token(ctx, owner)]);
	const revoked = tokenIdIn(made.at(-1)![1])!;
	await act(ctx, owner, { kind: 'revoke-token', person: idOf(owner), token: revoked });
	return Object.fromEntries(made) as unknown as Populated['tokens'];
};

const sessionsOf = async (ctx: Ctx, people: Populated['people']): Promise<Populated['sessions']> => {
	const open = (id: PersonId, means: 'passkey' | 'recovery' = 'passkey', limits: Limits = long) =>
		openSession(ctx, id, { means, limits, agent: 'a browser', request: 'test' });
	const made: [string, string][] = [];
	// The leaver is disabled by now, so that their session shows whether the state is read with each request.
	for (const [who, id] of Object.entries(people)) made.push([who, await open(id)]);
	made.push(['recovery', await open(people.owner, 'recovery')]);
	made.push(['expired', await open(people.owner, 'passkey', { idle: 30, absolute: 720 })]);
	return Object.fromEntries(made) as Populated['sessions'];
};

const waiting = async (
	ctx: Ctx,
	owner: Actor,
	model: string
): Promise<{ upload: string; sha256: string }> => {
	const bytes = Buffer.from(
		'period,loss,unemp\n2019-Q2,3.0,4.1\n2019-Q3,3.1,4.2\n2019-Q4,3.3,4.4\n2020-Q1,3.2,4.3\n'
	);
	const { upload, sha256 } = await storeUpload(ctx, owner, { model, bytes, fileName: 'next.csv' });
	return { upload, sha256 };
};

/** Two who have a relation to the model, and lose the role without which it means nothing. */
const former = async (ctx: Ctx, model: string, cast: Readonly<Record<Cast, Actor>>): Promise<void> => {
	const { admin, head, formerOwner, formerValidator } = cast;
	const appointment = { model, person: idOf(formerOwner), relation: 'owner' } as const;
	const { challenge } = await prepareTeamChange(ctx, admin, 'start', appointment);
	changeTeam(ctx, admin, 'start', await takeStepUp(ctx, admin, { challenge, response: '' }));
	assignValidator(ctx, head, { model, person: idOf(formerValidator) });
	await act(ctx, admin, { kind: 'end-role', person: idOf(formerOwner), role: 'owner' });
	await act(ctx, admin, { kind: 'end-role', person: idOf(formerValidator), role: 'validator' });
};

/** The head proposes the released policy, with a reason for each line. */
const proposal = async (ctx: Ctx, head: Actor): Promise<number> => {
	const { digest, policy } = latestRelease();
	const lines = policyLines(policy).map(({ path }) => ({ line: path, reason: 'As released.' }));
	const { challenge } = await prepareProposal(ctx, head, { release: digest, lines });
	const signed = await takeStepUp(ctx, head, { challenge, response: '' });
	return proposePolicy(ctx, head, { release: digest, lines }, signed);
};

const tell = async (ctx: Ctx, pass: (days: number) => void): Promise<Omit<Populated, 'data'>> => {
	const cast = Object.fromEntries(
		Object.entries(castRoles).map(([who, roles]) => [who, person({ ctx }, { name: `${who} Person`, roles })])
	) as unknown as Record<Cast, Actor>;
	const people = Object.fromEntries(
		Object.entries(cast).map(([who, actor]) => [who, idOf(actor)])
	) as unknown as Populated['people'];
	const { owner, otherOwner, leaver, head, admin } = cast;
	pass(1);
	// A leaver who had rights: only the state of the person takes them away.
	const own = await modelStory(ctx, owner, [people.developer, people.leaver]);
	const other = await modelStory(ctx, otherOwner, []);
	for (const [{ model }, validator] of [
		[own, cast.validator],
		[other, cast.secondValidator]
	] as const) {
		assignValidator(ctx, head, { model, person: idOf(validator) });
		proposeOverride(ctx, validator, { model, tier: 1, reason: 'Its losses weigh on capital.' });
	}
	const tokens = await tokensOf(ctx, owner, leaver);
	await act(ctx, admin, { kind: 'grant', person: people.stranger, role: 'validator' });
	await act(ctx, admin, { kind: 'disable', person: people.leaver });
	await former(ctx, own.model, cast);
	pass(1);
	const sessions = await sessionsOf(ctx, people);
	return {
		people,
		sessions,
		tokens,
		own: { ...own, ...(await waiting(ctx, owner, own.model)) },
		other: { ...other, ...(await waiting(ctx, otherOwner, other.model)) },
		policyProposal: await proposal(ctx, head),
		proposal: waitingProposals(ctx, admin)[0]!.seq
	};
};

/**
 * Makes the register in `folder`, for a server that will answer at `origin`: every step is the verb a person's click
 * calls. The clock of the making ends some minutes ago.
 */
export const populate = async (folder: string, origin: string): Promise<Populated> => {
	const data = join(folder, 'register');
	mkdirSync(data, { recursive: true, mode: 0o700 });
	const day = 24 * 60 * 60_000;
	const time = testClock(new Date(Date.now() - 2 * day - 10 * 60_000).toISOString());
	const config: Config = {
		data,
		origin,
		institution: 'This institution',
		demo: false,
		zone: 'UTC',
		logKeyFile: `${data}-log-key.pem`
	};
	const opened = await openRegister(config, time.now);
	try {
		return { data, ...(await tell(opened.ctx, (days) => time.forward(days * day))) };
	} finally {
		await opened.close();
	}
};
