import type { Actor, PersonId } from '$lib/domain/actor';
import type { Entry } from '$lib/domain/entry';
import { entrySentence, entryWords, peopleIn } from '$lib/domain/entry-words';
import { Absent } from '$lib/domain/faults';
import { verifierText } from '$lib/chain/verifier-key';
import type { Ctx } from '../context';
import { changesOf, type RowChange } from '../log/changes';
import type { Checkpoint } from '../log/log';
import { newestCheckpoint, evidenceOf, type EntryEvidence } from '../log/proofs';
import { listEntries, textOfEntry, type EntryFilter } from '../log/read';
import { allow, may } from '../people/allow';

/** An entry as a list shows it. */
export interface EntryLine {
	readonly seq: number;
	readonly at: string;
	readonly type: string;
	readonly actor: { readonly id: string; readonly name: string };
	/** What happened, as a sentence. */
	readonly sentence: string;
	/** What it is about; a person's label is their name. */
	readonly subjects: readonly { readonly ref: string; readonly label: string }[];
	readonly means: string;
	readonly changes: readonly RowChange[];
}

export interface LogPage {
	readonly entries: readonly EntryLine[];
	/** Folios to read on from, where there is more. */
	readonly older?: number;
	readonly newer?: number;
	/** False when the reader sees only entries about their own models. */
	readonly whole: boolean;
}

const perPage = 50;

/**
 * The references whose entries a person may see: all of them (undefined), or those of the models they own or develop.
 * @throws Refused for who may see none.
 */
const visible = (ctx: Ctx, actor: Actor): readonly string[] | undefined => {
	if (may(ctx, ctx.read, actor, 'log.read')) return undefined;
	const own =
		actor.person === 'system' || actor.person === 'cli'
			? []
			: ctx.facts
					.parties(ctx.read, actor.person)
					.filter(({ model }) => may(ctx, ctx.read, actor, 'entry.read', { model }))
					.map(({ model }) => model);
	if (own.length === 0) allow(ctx, ctx.read, actor, 'log.read');
	return own;
};

const idForm = /p_[a-z2-7]{26}/g;

/** A value with the ids of people replaced by their names. */
const named = (value: unknown, names: ReadonlyMap<string, string>): unknown => {
	if (typeof value === 'string') return value.replace(idForm, (id) => names.get(id) ?? id);
	if (Array.isArray(value)) return value.map((item) => named(item, names));
	if (typeof value !== 'object' || value === null) return value;
	return Object.fromEntries(Object.entries(value).map(([key, member]) => [key, named(member, names)]));
};

const line = (ctx: Ctx, entry: Entry, known: ReadonlyMap<string, string>): EntryLine => {
	const changes = changesOf(ctx.read, entry.seq);
	// A row may speak of people that its entry does not.
	const others = (JSON.stringify(changes).match(idForm) ?? []).filter((id) => !known.has(id)) as PersonId[];
	const names = others.length === 0 ? known : new Map([...known, ...ctx.people.names(others)]);
	const name = (id: string): string => names.get(id) ?? id;
	return {
		seq: entry.seq,
		at: entry.at,
		type: entry.type,
		actor: { id: entry.actor, name: name(entry.actor) },
		sentence: entrySentence(name(entry.actor), entryWords(entry, name)),
		subjects: entry.subjects.map(({ ref }) => ({ ref, label: name(ref) })),
		means: entry.auth.means,
		changes: changes.map((change) => named(change, names) as RowChange)
	};
};

/** Where a page starts: below a folio (older), above one (newer), or at the newest entry. */
export interface Cursor {
	readonly below?: number;
	readonly above?: number;
}

const narrowed = (filter: EntryFilter, { below, above }: Cursor): EntryFilter => {
	const before = Math.min(filter.before ?? Infinity, below ?? Infinity);
	const after = Math.max(filter.after ?? -1, above ?? -1);
	return { ...filter, ...(before < Infinity && { before }), ...(after >= 0 && { after }) };
};

/** A page of the log, newest first, under a filter. @throws Refused */
export const logPage = (ctx: Ctx, actor: Actor, filter: EntryFilter, cursor: Cursor = {}): LogPage => {
	const within = visible(ctx, actor);
	const scoped = { ...filter, ...(within && { within }) };
	const forwards = cursor.above !== undefined;
	const found = listEntries(
		ctx.read,
		narrowed(scoped, cursor),
		forwards ? 'oldest' : 'newest',
		perPage
	).entries;
	const entries = forwards ? [...found].reverse() : found;
	const names = ctx.people.names(entries.flatMap(peopleIn));
	const any = (to: Cursor): boolean =>
		listEntries(ctx.read, narrowed(scoped, to), 'newest', 1).entries.length > 0;
	const [first, last] = [entries[0]?.seq, entries.at(-1)?.seq];
	return {
		entries: entries.map((entry) => line(ctx, entry, names)),
		whole: within === undefined,
		...(last !== undefined && any({ below: last }) && { older: last }),
		...(first !== undefined && any({ above: first }) && { newer: first })
	};
};

/** Entries in the order they were written, for programs; `next` is the folio to read on after. @throws Refused */
export const entriesAfter = (
	ctx: Ctx,
	actor: Actor,
	filter: EntryFilter
): { readonly entries: readonly Entry[]; readonly next?: number } => {
	const within = visible(ctx, actor);
	const { entries, more } = listEntries(ctx.read, { ...filter, ...(within && { within }) }, 'oldest', 100);
	const last = entries.at(-1);
	return { entries, ...(more && last && { next: last.seq }) };
};

/** @throws Absent for an entry that is not there or that the asker may not see; Refused */
const visibleEntry = (ctx: Ctx, actor: Actor, seq: number): Entry => {
	const within = visible(ctx, actor);
	const entry = JSON.parse(textOfEntry(ctx.read, seq)) as Entry;
	if (within && !entry.subjects.some(({ ref }) => within.includes(ref)))
		throw new Absent(`There is no entry E-${seq}.`);
	return entry;
};

export interface EntryView extends EntryLine, EntryEvidence {
	readonly entry: Entry;
	readonly request: string;
	readonly verifierKey: string;
	readonly people: Readonly<Record<string, string>>;
}

/** One entry whole: its words, what it changed, its bytes and its proof. @throws Absent, Refused */
export const entryView = (ctx: Ctx, actor: Actor, seq: number): EntryView => {
	const entry = visibleEntry(ctx, actor, seq);
	const names = ctx.people.names(peopleIn(entry));
	return {
		...line(ctx, entry, names),
		...evidenceOf(ctx.read, seq),
		entry,
		request: entry.request,
		verifierKey: verifierText(ctx.log.verifier),
		people: Object.fromEntries(names)
	};
};

/** The newest signed head and the key it is signed with; for everybody who may see some of the log. @throws Refused */
export const checkpointView = (ctx: Ctx, actor: Actor): Checkpoint & { readonly verifierKey: string } => {
	visible(ctx, actor);
	return { ...newestCheckpoint(ctx.read), verifierKey: verifierText(ctx.log.verifier) };
};

/** Names of those who wrote entries, for choosing one. */
export const namedActors = (
	ctx: Ctx,
	ids: readonly string[]
): readonly { readonly id: string; readonly name: string }[] => {
	const names = ctx.people.names(ids as readonly (PersonId | 'system' | 'cli')[]);
	return ids
		.map((id) => ({ id, name: names.get(id) ?? id }))
		.sort((a, b) => a.name.localeCompare(b.name, 'en'));
};
