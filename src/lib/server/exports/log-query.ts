import { actorForm, typeForm } from '$lib/chain/entry';
import { Invalid, type Issue } from '$lib/domain/faults';
import type { Handle } from '../db/handle';
import { folioFrom, type EntryFilter } from '../log/read';

/** What a reader typed, to be shown again as it was. */
export interface TypedQuery {
	readonly type: string;
	readonly subject: string;
	readonly actor: string;
	readonly after: string;
	readonly before: string;
}

const folio = /^(?:E-)?(0|[1-9]\d{0,14})$/;
const day = /^\d{4}-\d{2}-\d{2}$/;

const isDay = (text: string): boolean =>
	day.test(text) && !Number.isNaN(Date.parse(text)) && new Date(text).toISOString().startsWith(text);

/** `120` and `E-120` are a folio; a date is the first folio of that day (UTC). */
const placeOf = (from: Handle, text: string): number | undefined => {
	const number = folio.exec(text)?.[1];
	if (number !== undefined) return Number(number);
	return isDay(text) ? folioFrom(from, `${text}T00:00:00.000Z`) : undefined;
};

const isFolio = (text: string): boolean => folio.test(text);

/** Reads the filters of the log from an address: `after` a folio or from a day on, `before` a folio or a day. */
export const readLogQuery = (
	from: Handle,
	params: URLSearchParams
): { readonly filter: EntryFilter; readonly typed: TypedQuery; readonly issues: readonly Issue[] } => {
	const get = (name: string): string => params.get(name)?.trim() ?? '';
	const typed = {
		type: get('type'),
		subject: get('subject'),
		actor: get('actor'),
		after: get('after'),
		before: get('before')
	};
	const issues: Issue[] = [];
	const wrong = (pointer: string, message: string): undefined => void issues.push({ pointer, message });
	if (typed.type && !typeForm.test(typed.type)) wrong('/type', 'An event type reads like model.registered.');
	if (typed.actor && !actorForm.test(typed.actor))
		wrong('/actor', 'Choose a person, the register or the command line.');
	if (typed.subject.length > 200) wrong('/subject', 'A reference has at most 200 characters.');
	const place = (name: 'after' | 'before'): number | undefined =>
		typed[name] === ''
			? undefined
			: (placeOf(from, typed[name]) ?? wrong(`/${name}`, 'Give a folio (E-120) or a date (2026-03-02).'));
	const [after, before] = [place('after'), place('before')];
	const filter: EntryFilter = {
		...(typed.type && { type: typed.type }),
		...(typed.subject && { subject: typed.subject }),
		...(typed.actor && { actor: typed.actor }),
		// A day includes its first entry, a folio excludes itself.
		...(after !== undefined && { after: isFolio(typed.after) ? after : after - 1 }),
		...(before !== undefined && { before })
	};
	return { filter, typed, issues };
};

/** The same for programs. @throws Invalid */
export const strictLogQuery = (from: Handle, params: URLSearchParams): EntryFilter => {
	const { filter, issues } = readLogQuery(from, params);
	if (issues.length > 0) throw new Invalid(issues);
	return filter;
};
