import { randomBytes } from 'node:crypto';
import { base32 } from '$lib/chain/base32';
import { digestOf } from '$lib/chain/digest';
import type { Actor } from '$lib/domain/actor';
import { Conflict, Invalid } from '$lib/domain/faults';
import { limits, type Choices } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import type { Ctx } from '../context';
import { record } from '../log/record';
import { allow } from '../people/allow';
import { shownFileName } from './file-name';
import { expiredUploads, uploadById, vintageOfBytes, waitingBytes } from './lineage.queries';
import type { ParsedUpload, ParseOutcome } from './parse';
import type { Question } from './rejected';

/** What a person sends: exact bytes and the name the file had. */
export interface UploadInput {
	readonly model: string;
	readonly bytes: Uint8Array;
	readonly fileName: string;
	readonly choices?: Choices;
}

/** A file that waits to be confirmed, as it reads with the given choices. */
export interface Preview {
	readonly upload: string;
	readonly model: string;
	readonly sha256: string;
	readonly size: number;
	readonly fileName: string;
	readonly expiresAt: string;
	readonly choices: Choices;
	/** The table, when it can be read. */
	readonly parsed?: ParsedUpload;
	/** What is wrong with it under these choices, and what the uploader is asked. */
	readonly issues: readonly UploadIssue[];
	readonly questions: readonly Question[];
}

const waitsFor = 24 * 60 * 60 * 1000;
/** Longest time for a reading, the wait for a thread included. */
const readingTime = 30_000;
/** A person's uploads that wait, together. */
const mostWaiting = 8 * limits.bytes;

/** Reads a file in a worker thread; a reading that takes too long or too much memory ends with its thread. */
export const parsed = async (ctx: Ctx, bytes: Uint8Array, choices: Choices): Promise<ParseOutcome> => {
	const signal = AbortSignal.timeout(readingTime);
	try {
		return await ctx.pool.parse({ bytes, choices }, { signal });
	} catch (error) {
		// The thread ended at its memory limit; the server itself is unharmed.
		if ((error as NodeJS.ErrnoException).code === 'ERR_WORKER_OUT_OF_MEMORY')
			return { state: 'refused', issues: [uploadIssue('too-much-memory', [])] };
		if (!signal.aborted) throw error;
		return { state: 'refused', issues: [uploadIssue('took-too-long', [readingTime / 1000])] };
	}
};

/** Every sentence names the file, and the sheet where there is one. */
const named = (issues: readonly UploadIssue[], fileName: string, sheet: string | undefined): UploadIssue[] =>
	issues.map((issue) => ({
		...issue,
		message: `${fileName}${sheet === undefined ? '' : `, sheet ${sheet}`}: ${issue.message}`
	}));

/** Enters that a file was not taken, without its name, and says why. */
const refuse = (
	ctx: Ctx,
	actor: Actor,
	input: UploadInput,
	issues: readonly UploadIssue[],
	sha256: string | undefined
): never => {
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'dataset.store', { model: input.model });
		record(ctx, tx, actor, grant, {
			type: 'upload.refused',
			subjects: [input.model],
			payload: {
				model: input.model,
				code: issues[0]!.code,
				issues: issues.length,
				size: input.bytes.length,
				...(sha256 === undefined ? {} : { sha256 })
			}
		});
	});
	throw new Invalid(issues);
};

const previewOf = (
	row: { id: string; model: string; sha256: string; size: number; file_name: string; expires_at: string },
	choices: Choices,
	outcome: ParseOutcome
): Preview => ({
	upload: row.id,
	model: row.model,
	sha256: row.sha256,
	size: row.size,
	fileName: row.file_name,
	expiresAt: row.expires_at,
	choices,
	...(outcome.state === 'parsed' ? { parsed: outcome } : {}),
	issues: outcome.state === 'parsed' ? [] : named(outcome.issues, row.file_name, choices.sheet),
	questions: outcome.state === 'question' ? outcome.questions : []
});

/**
 * Takes a file, reads it, and keeps its bytes for a day so that the preview can be confirmed; nothing of the register
 * changes. A file that cannot be read is not kept, and its refusal is entered in the log.
 * @throws Invalid with the codes of the closed list; Refused, Absent
 */
export const storeUpload = async (ctx: Ctx, actor: Actor, input: UploadInput): Promise<Preview> => {
	allow(ctx, ctx.read, actor, 'dataset.store', { model: input.model });
	const name = shownFileName(input.fileName);
	if ('issue' in name) return refuse(ctx, actor, input, [name.issue], undefined);
	if (input.bytes.length > limits.bytes)
		return refuse(ctx, actor, input, named([tooLarge()], name.name, undefined), undefined);
	const sha256 = digestOf(input.bytes);
	const same = ctx.read.first(vintageOfBytes(ctx.read.q, sha256, input.model));
	if (same)
		return refuse(
			ctx,
			actor,
			input,
			named([uploadIssue('same-file', [same.ref])], name.name, undefined),
			sha256
		);
	const choices = input.choices ?? {};
	const outcome = await parsed(ctx, input.bytes, choices);
	if (outcome.state === 'refused')
		return refuse(ctx, actor, input, named(outcome.issues, name.name, choices.sheet), sha256);
	const now = ctx.now();
	const row = {
		id: `u_${base32(randomBytes(16))}`,
		person: actor.person,
		model: input.model,
		sha256,
		size: input.bytes.length,
		bytes: Buffer.from(input.bytes),
		file_name: name.name,
		at: now.toISOString(),
		expires_at: new Date(now.getTime() + waitsFor).toISOString()
	};
	ctx.write((tx) => {
		allow(ctx, tx, actor, 'dataset.store', { model: input.model });
		tx.run(expiredUploads(tx.q, row.at));
		if (Number(tx.first(waitingBytes(tx.q, actor.person))?.n ?? 0) + row.size > mostWaiting)
			throw new Invalid([
				{ pointer: '', message: 'Too many of your files wait to be confirmed. Confirm or discard one first.' }
			]);
		tx.insert('upload', row);
	});
	return previewOf(row, choices, outcome);
};

/** The sentence of a file over the limit, also for a door that stops reading it. */
export const tooLarge = (): UploadIssue => uploadIssue('too-large', [limits.bytes / (1024 * 1024)]);

/**
 * An upload that waits, by the person who sent it alone.
 * @throws Conflict when it is another's, was confirmed, or has expired
 */
export const waitingUpload = (ctx: Ctx, actor: Actor, id: string, model: string) => {
	const row = ctx.read.first(uploadById(ctx.read.q, id));
	if (!row || row.person !== actor.person || row.model !== model || row.expires_at <= ctx.now().toISOString())
		throw new Conflict('This upload is not waiting any more. Send the file again.');
	return row;
};

/**
 * Reads a waiting upload again with other choices. A file that cannot be read under them stays: other choices may do.
 * @throws Absent, Refused, Conflict
 */
export const previewUpload = async (
	ctx: Ctx,
	actor: Actor,
	asked: { readonly model: string; readonly upload: string; readonly choices: Choices }
): Promise<Preview> => {
	allow(ctx, ctx.read, actor, 'dataset.store', { model: asked.model });
	const row = waitingUpload(ctx, actor, asked.upload, asked.model);
	return previewOf(row, asked.choices, await parsed(ctx, row.bytes, asked.choices));
};

/** Throws a waiting upload away. */
export const discardUpload = (
	ctx: Ctx,
	actor: Actor,
	asked: { readonly model: string; readonly upload: string }
): void => {
	ctx.write((tx) => {
		allow(ctx, tx, actor, 'dataset.store', { model: asked.model });
		waitingUpload(ctx, actor, asked.upload, asked.model);
		tx.remove('upload', { id: asked.upload });
	});
};
