import { randomBytes } from 'node:crypto';
import type { PublicKeyCredentialRequestOptionsJSON } from '@simplewebauthn/server';
import { base32 } from '$lib/chain/base32';
import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import { rootOf } from '$lib/chain/merkle';
import { challengeOf, statementText, type Statement } from '$lib/chain/step-up';
import type { Actor, PersonId } from '$lib/domain/actor';
import type { StepUp } from '$lib/domain/entry';
import { Conflict, Refused } from '$lib/domain/faults';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { verifyAssertion, type Assertion } from './assertion';
import { seatKeyOf } from './auth.queries';
import { issueChallenge, takeChallenge } from './challenge';
import { noteUse } from './credentials';
import { AuthFault } from './fault';
import { limitsOf, TooMany } from './limits';
import { stepUpOptions } from './options';
import { signAsSeat } from './seat-key';

export interface Digest {
	readonly name: string;
	/** `sha256:<64 hex>` */
	readonly sha256: string;
}

/** What is to be signed. */
export interface ToSign {
	/** Row of the permission table. */
	readonly action: string;
	/** The closed word chosen. */
	readonly decision: string;
	/** Reference or person id the act is about. */
	readonly subject: string;
	/** What the entry will say; its digest is signed, and the verb gets it back. */
	readonly payload: Readonly<Record<string, unknown>>;
	/** Digests of what else is decided upon. */
	readonly digests?: readonly Digest[];
}

/** What a page needs for the ceremony: plain data. */
export interface StepUpRequest {
	/** Names the statement when it comes back signed. */
	readonly challenge: string;
	readonly statement: Statement;
	/** First eight base32 characters of the challenge, which stand in the entry too. */
	readonly code: string;
	/** For the browser; absent for a seat, whose key the server holds. */
	readonly options?: PublicKeyCredentialRequestOptionsJSON;
}

/** The code people compare: on the page before they sign, in the entry after. */
export const codeOf = (statement: string): string => base32(challengeOf(statement)).slice(0, 8);

const digestsOf = ({ payload, digests = [] }: ToSign): Digest[] =>
	[...digests, { name: 'payload', sha256: digestOf(Buffer.from(canonical(payload), 'utf8')) }].sort((a, b) =>
		a.name < b.name ? -1 : 1
	);

const personOf = (actor: Actor, action: string): PersonId => {
	if (actor.person === 'system' || actor.person === 'cli' || actor.session === undefined)
		throw new Refused('step-up', action, 'This is signed by a person in a session.');
	return actor.person;
};

/** Builds the statement over the present head of the log and keeps it for five minutes. */
export const prepareStepUp = async (ctx: Ctx, actor: Actor, toSign: ToSign): Promise<StepUpRequest> => {
	const person = personOf(actor, toSign.action);
	const frontier = ctx.log.frontier();
	const statement: Statement = Object.freeze({
		action: toSign.action,
		at: ctx.now().toISOString(),
		by: person,
		decision: toSign.decision,
		digests: digestsOf(toSign),
		log: { root: rootOf(frontier).toString('base64'), size: frontier.size },
		nonce: randomBytes(16).toString('base64url'),
		register: ctx.log.origin,
		subject: toSign.subject,
		v: 1
	});
	const text = statementText(statement);
	const challenge = challengeOf(text);
	const payload = canonical(toSign.payload);
	issueChallenge(ctx, {
		kind: 'step-up',
		holder: actor.session!,
		person,
		signs: { challenge, statement: text, payload }
	});
	return Object.freeze({
		challenge: challenge.toString('base64url'),
		statement,
		code: codeOf(text),
		...(actor.means === 'seat' ? {} : { options: await stepUpOptions(ctx, person, challenge) })
	});
};

/** A signed statement, not yet acted upon. */
export interface Signed {
	readonly stepUp: StepUp;
	readonly statement: Statement;
	/** What the entry was to say when the page was built. */
	readonly payload: Readonly<Record<string, unknown>>;
	/** Notes the use of the credential, in the transaction of the act. */
	readonly note: (tx: Tx) => void;
}

const signedOf = (row: Schema['challenge'], stepUp: StepUp, note: (tx: Tx) => void): Signed =>
	Object.freeze({
		stepUp,
		statement: JSON.parse(row.statement!) as Statement,
		payload: JSON.parse(row.payload!) as Record<string, unknown>,
		note
	});

const byPasskey = async (ctx: Ctx, actor: Actor, session: string, response: string): Promise<Signed> => {
	const assertion: Assertion = await verifyAssertion(ctx, response, 'step-up', session);
	if (assertion.person !== actor.person)
		throw new AuthFault('user handle', 'The passkey is another person’s than the session.');
	const { challenge, credential } = assertion;
	const stepUp = { statement: challenge.statement!, credential, ...assertion.response };
	return signedOf(challenge, stepUp, (tx) => noteUse(ctx, tx, actor, assertion));
};

const bySeat = (ctx: Ctx, actor: Actor, person: PersonId, challenge: string): Signed => {
	const row = takeChallenge(ctx, Buffer.from(challenge, 'base64url'), 'step-up', actor.session!);
	const key = ctx.read.first<Schema['seat_key']>(seatKeyOf(ctx.read.q, person));
	if (!key || row.person !== person) throw new AuthFault('unknown credential', 'This person holds no seat.');
	return signedOf(row, signAsSeat(ctx.config, key, row.statement!), () => undefined);
};

/** What a form posts back: the authenticator's answer, or for a seat only the challenge. */
export interface StepUpAnswer {
	readonly challenge: string;
	readonly response: string;
}

/**
 * Verifies a signed statement; the challenge is consumed whatever comes of it. Wait for this before the transaction.
 * @throws Refused when the signature does not stand
 */
export const takeStepUp = async (ctx: Ctx, actor: Actor, answer: StepUpAnswer): Promise<Signed> => {
	const person = personOf(actor, 'step-up');
	const limits = limitsOf(ctx);
	try {
		await limits.check('step-ups a person', person);
		if (actor.means === 'seat') return bySeat(ctx, actor, person, answer.challenge);
		return await byPasskey(ctx, actor, actor.session!, answer.response);
	} catch (fault) {
		if (!(fault instanceof AuthFault || fault instanceof TooMany)) throw fault;
		await limits.count('step-ups a person', person);
		throw new Refused(
			'step-up',
			'step-up',
			`Not signed: ${fault.message} Open the page again and sign afresh.`
		);
	}
};

/**
 * Compares what was signed with what is about to be entered, inside the transaction of the act.
 * @throws Conflict when anything moved since the page was opened
 */
export const confirmSigned = (ctx: Ctx, tx: Tx, actor: Actor, signed: Signed, now: ToSign): StepUp => {
	const { statement } = signed;
	const same =
		statement.action === now.action &&
		statement.decision === now.decision &&
		statement.subject === now.subject &&
		statement.by === actor.person &&
		statement.register === ctx.log.origin &&
		canonical(statement.digests) === canonical(digestsOf(now));
	if (!same) throw new Conflict('This changed since you opened the page. Nothing was stored; read it again.');
	signed.note(tx);
	return signed.stepUp;
};
