import { ask, type Answer, type Asked } from './ask';
import type { Bank } from './bank';
import { casesOf, type Case } from './cases';
import { expectedOf, groupOf, type Expected } from './expected';
import { personasOf, type Persona } from './personas';
import { ruleOf, verdictOf, type Row } from './row';

/** The request of a case with a persona's credential, as a browser or a program of theirs sends it. */
export const asPersona = (bank: Bank, { asked }: Case, persona: Persona): Asked => {
	const page = !asked.path.startsWith('/api/');
	const headers: Record<string, string> = { ...asked.headers, accept: page ? 'text/html' : '*/*' };
	// As a page's script sends a form: the action alone is answered, and no page loaded after it that could refuse too.
	if (page && asked.method === 'POST')
		Object.assign(headers, { accept: 'application/json', 'x-sveltekit-action': 'true' });
	if (persona.kind === 'token') headers['authorization'] = `Bearer ${persona.token}`;
	else if (persona.cookie !== undefined) headers['cookie'] = `keelbook-local=${persona.cookie}`;
	// A program with a token has no origin; a page's form has.
	if (asked.method === 'POST' && (page || persona.kind !== 'token')) headers['origin'] = bank.origin;
	return { ...asked, headers };
};

interface Attempt {
	readonly persona: Persona;
	readonly expected: Expected;
}

const keyOf = ({ expected: { refusal } }: Attempt): string | undefined =>
	refusal && `${refusal.person} ${refusal.rule}`;

/** A refusal is entered once a minute for a person and rule, so that each minute holds each of them once. */
const inMinutes = (attempts: readonly Attempt[]): Attempt[][] => {
	const minutes: Attempt[][] = [];
	for (const attempt of attempts) {
		const key = keyOf(attempt);
		const free = minutes.find((minute) => key === undefined || !minute.some((other) => keyOf(other) === key));
		if (free) free.push(attempt);
		else minutes.push([attempt]);
	}
	return minutes;
};

/** A register, and how far its log was read. */
export interface Watched {
	readonly bank: Bank;
	seen: number;
}

/** What requests have entered since the last look, a line each. */
export const entered = (watched: Watched): string[] => {
	const entries = watched.bank.entriesAfter(watched.seen);
	watched.seen = entries.at(-1)?.seq ?? watched.seen;
	return entries.map(({ type, actor, auth, payload }) =>
		type === 'access.refused'
			? `${actor} ${type} ${auth.rule} ${(payload as { action: string }).action}`
			: `${actor} ${type}`
	);
};

const refusalLine = ({ expected: { refusal } }: Attempt): string[] =>
	refusal ? [`${refusal.person} access.refused ${refusal.rule} ${refusal.action ?? ''}`] : [];

/** Said of what is not there and of what may not be known alike. */
const nothing = 'There is nothing under this address or reference.';

/** A form action's result says its status in its body. */
const resultOf = ({ status, headers, text }: Answer): { status: number; location?: string | undefined } => {
	if (headers['content-type'] !== 'application/json' || status !== 200)
		return { status, location: headers.location };
	const said = JSON.parse(text) as { type?: string; status?: number; location?: string };
	return said.type === 'failure' || said.type === 'redirect'
		? { status: said.status ?? status, location: said.location }
		: { status };
};

const detail = (row: Row, { expected }: Attempt, answer: Answer): string | undefined => {
	const { word, refusal } = expected;
	if ((word === 'hide' || word === 'absent') && !answer.text.includes(nothing))
		return 'says more than nothing';
	if (word === 'sign in' && groupOf(row.route) === 'desk')
		return resultOf(answer).location?.startsWith('/sign-in?next=')
			? undefined
			: `led to ${resultOf(answer).location}`;
	if (groupOf(row.route) !== 'api' || answer.status < 400) return undefined;
	if (answer.headers['content-type'] !== 'application/problem+json') return 'no problem document';
	const { rule } = JSON.parse(answer.text) as { rule?: string };
	return word === 'refuse' && rule !== refusal?.rule ? `the answer names the rule ${rule}` : undefined;
};

/** Asks, and says in a line what is not as the table has it. */
const attemptOf = async (bank: Bank, row: Row, at: Case, attempt: Attempt): Promise<string[]> => {
	const { persona, expected } = attempt;
	const answer = await ask(bank.origin, asPersona(bank, at, persona));
	const about = `${at.reference} · ${persona.name} · ${expected.word}`;
	const { status } = resultOf(answer);
	if (!expected.statuses.includes(status)) {
		const fault = status === 500 ? bank.server.output().trim().split('\n').at(-1) : '';
		return [`${about}: ${status}, not ${expected.statuses.join(' or ')} ${fault}`];
	}
	const wrong = detail(row, attempt, answer);
	return wrong === undefined ? [] : [`${about}: ${wrong}`];
};

/** Lines wanted and not entered, and the reverse; where a wanted line names no action, any will do. */
const differences = (wanted: readonly string[], lines: readonly string[]): string[] => {
	const left = [...lines];
	const missing = wanted.filter((line) => {
		const at = left.findIndex((other) => other === line || (line.endsWith(' ') && other.startsWith(line)));
		if (at >= 0) left.splice(at, 1);
		return at < 0;
	});
	return [...missing.map((line) => `not entered: ${line}`), ...left.map((line) => `entered: ${line}`)];
};

/** A minute in which everybody asks at once; whoever writes does so after the others, in turn. */
const walkMinute = async (
	watched: Watched,
	row: Row,
	at: Case,
	minute: readonly Attempt[]
): Promise<string[]> => {
	const { bank } = watched;
	if (minute.some(keyOf)) await bank.nextMinute();
	const writes = row.enters ?? row.entersOnce;
	const last = minute.filter(({ expected }) => writes && expected.word === 'allow');
	const answers = await Promise.all(
		minute.filter((attempt) => !last.includes(attempt)).map((attempt) => attemptOf(bank, row, at, attempt))
	);
	for (const attempt of last) answers.push(await attemptOf(bank, row, at, attempt));
	const lines = entered(watched).filter((line) => !row.notes?.some((type) => line.split(' ')[1] === type));
	const writers = row.entersOnce ? last.slice(0, 1) : last;
	const wanted = [
		...minute.flatMap(refusalLine),
		...writers.flatMap(({ persona }) =>
			(writes ?? []).map((type) => `${'person' in persona ? persona.person : ''} ${type}`)
		)
	];
	return [...answers.flat(), ...differences(wanted, lines).map((line) => `${at.reference}: ${line}`)];
};

/** Whether the two admins are answered differently. */
const adminsDiffer = (row: Row): boolean =>
	row.entersOnce !== undefined ||
	verdictOf(row, 'admin') !== verdictOf(row, 'secondAdmin') ||
	ruleOf(row, 'admin') !== ruleOf(row, 'secondAdmin');

/**
 * Left out is what one request shows for all: a token is stopped at a page, or for want of the scope, and an address is
 * malformed, whatever else stands in the request.
 */
const asks = (row: Row, { reference }: Case, persona: Persona): boolean => {
	if (reference === 'own') return persona.name !== 'secondAdmin' || adminsDiffer(row);
	if (persona.kind === 'token')
		return groupOf(row.route) === 'api' && ['every', 'leaver', row.scope].includes(persona.scope);
	if (reference === 'malformed')
		return ['anonymous', 'recovery'].includes(persona.kind) || persona.name === 'owner';
	return persona.name !== 'secondAdmin';
};

/** Asks everything of a row as everybody; a line for each thing that is not as the table has it. */
export const walk = async (watched: Watched, row: Row): Promise<string[]> => {
	const { bank } = watched;
	const wrong: string[] = [];
	const personas = personasOf(bank);
	for (const at of casesOf(row, bank)) {
		const attempts = personas
			.filter((persona) => asks(row, at, persona))
			.map((persona) => ({ persona, expected: expectedOf(row, at, persona) }));
		for (const minute of inMinutes(attempts)) wrong.push(...(await walkMinute(watched, row, at, minute)));
	}
	return wrong;
};
