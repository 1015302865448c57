import { hash, verify } from '@node-rs/argon2';
import { Invalid } from '$lib/domain/faults';
import { AuthFault } from './fault';
import { isCommon } from './common-passwords';

/** argon2id with 64 MiB and three passes: above OWASP's least of 19 MiB and two. */
const argon2id = 2;
const cost = { algorithm: argon2id, memoryCost: 65_536, timeCost: 3, parallelism: 1 } as const;

const least = 15;
const most = 128;

/** One form for what keyboards write differently. */
const normal = (password: string): string => password.normalize('NFKC');

/** Parts of a name or address that a password must not hold: words of four letters and more. */
const wordsOf = (texts: readonly string[]): string[] =>
	texts
		.flatMap((text) =>
			normal(text)
				.toLowerCase()
				.split(/[^\p{L}\p{N}]+/u)
		)
		.filter((word) => word.length >= 4);

/**
 * Refuses a weak password: length after NFKC only, no rules of composition (NIST SP 800-63B-4, section 3.1.1.2).
 * @param about name, mail address and institution of the person
 * @throws Invalid at /password
 */
export const checkPassword = (password: string, about: readonly string[]): void => {
	const text = normal(password);
	const length = [...text].length;
	const refuse = (message: string): never => {
		throw new Invalid([{ pointer: '/password', message }]);
	};
	if (length < least) refuse(`A password needs at least ${least} characters; a sentence will do.`);
	if (length > most) refuse(`A password has at most ${most} characters.`);
	const lower = text.toLowerCase();
	if (wordsOf(about).some((word) => lower.includes(word)))
		refuse('The password holds your name, your mail address or the name of the institution.');
	if (isCommon(lower)) refuse('This password is among the first that anyone would try.');
};

let running = 0;
const waiting: (() => void)[] = [];

/** Four computations at once, sixteen in wait: 64 MiB each. @throws AuthFault beyond that */
const inTurn = async <T>(work: () => Promise<T>): Promise<T> => {
	if (running >= 4) {
		if (waiting.length >= 16) throw new AuthFault('too many tries', 'Too many sign-ins at once; try again.');
		await new Promise<void>((resume) => waiting.push(resume));
	} else running += 1;
	try {
		return await work();
	} finally {
		// A place that is handed on stays taken.
		const next = waiting.shift();
		if (next) next();
		else running -= 1;
	}
};

export const hashPassword = (password: string): Promise<string> => inTurn(() => hash(normal(password), cost));

let dummy: Promise<string> | undefined;

/** Verifies; without a stored hash an equal computation is made and the answer is no, so that time tells nothing. */
export const passwordMatches = async (stored: string | undefined, password: string): Promise<boolean> => {
	dummy ??= hashPassword('no account has this password');
	const against = stored ?? (await dummy);
	const matches = await inTurn(() => verify(against, normal(password).slice(0, 4 * most)));
	return stored !== undefined && matches;
};
