import type { Scope } from '$lib/domain/actor';
import type { Action } from '$lib/domain/permission-table';
import type { Populated, Subject } from '../support/populated';

/** What a signed-in person is to the model asked for; without a model, what they are to M-001. */
export const standings = [
	'owner',
	'developer',
	'validator',
	'otherOwner',
	'otherDeveloper',
	'otherValidator',
	'head',
	'auditor',
	'admin',
	'secondAdmin',
	'stranger'
] as const;
export type Standing = (typeof standings)[number];

/**
 * allow: authorised, whatever comes after · refuse: 403, entered in the log · hide: 404, entered in the log ·
 * absent: 404, nothing entered.
 */
export type Verdict = 'allow' | 'refuse' | 'hide' | 'absent';

/** The body of a POST. */
export type Body =
	| { readonly form: Readonly<Record<string, string | readonly string[]>> }
	| { readonly file: { readonly name: string; readonly text: string } }
	| { readonly json: unknown }
	| { readonly text: string };

/** What one method of one route answers to everybody. */
export interface Row {
	readonly route: string;
	readonly method: 'GET' | 'POST' | `POST ?/${string}`;
	/** Which of several bodies or addresses of one method. */
	readonly what?: string;
	/** The row of the permission table that answers, as the log names it. */
	readonly action: Action | 'step-up';
	readonly actions?: Readonly<Partial<Record<Standing, Action>>>;
	/** What the log names for those who may not read the subject, where reading is asked first. */
	readonly unread?: Action;
	/** Who is allowed; everybody, where it is absent. */
	readonly allows?: readonly Standing[];
	/** What the others get. */
	readonly others?: Exclude<Verdict, 'allow'>;
	readonly but?: Readonly<Partial<Record<Standing, Verdict>>>;
	/** Status of those who are allowed; several where the second finds the work of the first. */
	readonly allowed: number | readonly number[];
	/** Where they are told apart by what they find. */
	readonly finds?: Readonly<Partial<Record<Standing, number>>>;
	/** Rule named by a refusal, S11 where absent; by standing where it differs. */
	readonly rule?: string;
	readonly rules?: Readonly<Partial<Record<Standing, string>>>;
	/** What the address is about; model and person are asked for by own, other's, absent and malformed reference. */
	readonly about?: 'model' | 'person';
	/** Search part of the address, beginning with `?` (for a form action with `&`). */
	readonly search?: (subject: Subject) => string;
	/** The parameter [n] of the route. */
	readonly n?: (subject: Subject) => number;
	readonly send?: (subject: Subject, bank: Populated) => Body;
	/** Event types that may be entered besides, such as a sign-in that failed. */
	readonly notes?: readonly string[];
	/** Event types that each one allowed enters. */
	readonly enters?: readonly string[];
	/** Event types that the first one allowed enters; the next ones come too late. */
	readonly entersOnce?: readonly string[];
	/** The reference in the address plays no part: what does not exist is answered like one's own. */
	readonly blind?: true;
	/** A part, such as a vintage, is looked up before permission is asked. */
	readonly partFirst?: true;
	/** Permission is asked before the reference is looked up: whoever is refused is refused there too. */
	readonly judgedFirst?: true;
	/** A list under a filter: whoever may see no list is refused whatever the filter says. */
	readonly lists?: true;
	/** The scope that an API route asks of tokens. */
	readonly scope?: Scope;
	/** Rules by which tokens with the right scope are refused nevertheless. */
	readonly tokenRules?: Readonly<Partial<Record<Scope | 'every', string>>>;
	/** What a recovery session gets, where it is not refused by the rule `recovery`. */
	readonly recovery?: Verdict;
	/** A door is open: statuses for whoever is not signed in, is signed in, is in recovery. */
	readonly door?: {
		readonly anonymous: number | readonly number[];
		readonly signedIn: number | readonly number[];
		readonly recovery: number | readonly number[];
	};
}

export const team: readonly Standing[] = ['owner', 'developer'];
export const admins: readonly Standing[] = ['admin', 'secondAdmin'];
/** Those who may read a model whole. */
export const readers: readonly Standing[] = [...team, 'validator', 'otherValidator', 'head', 'auditor'];

/** What belongs to a model of others is not there for those who may not read it. */
export const unseen = {
	but: { otherOwner: 'hide', otherDeveloper: 'hide', admin: 'hide', secondAdmin: 'hide', stranger: 'hide' }
} as const;

/** What a row says of one standing. */
export const verdictOf = (row: Row, standing: Standing): Verdict =>
	row.but?.[standing] ?? (!row.allows || row.allows.includes(standing) ? 'allow' : (row.others ?? 'refuse'));

export const actionOf = (row: Row, standing: Standing): string =>
	row.actions?.[standing] ??
	(row.unread !== undefined && !readers.includes(standing) ? row.unread : row.action);

export const ruleOf = (row: Row, standing: Standing): string => row.rules?.[standing] ?? row.rule ?? 'S11';
