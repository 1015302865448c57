import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { Actor } from '$lib/domain/actor';
import { Absent, Conflict, Invalid } from '$lib/domain/faults';
import { seriesId, type Note, type ParsedTable } from '$lib/domain/lineage';
import { uploadIssue, type UploadIssue } from '$lib/domain/lineage-codes';
import {
	vintageInputSchema,
	type ColumnTaken,
	type VintageInput,
	type VintageTaken
} from '$lib/domain/lineage-input';
import { part, reference } from '$lib/domain/references';
import { taken } from '$lib/domain/register-input';
import type { Ctx } from '../context';
import type { Tx } from '../db/handle';
import { record } from '../log/record';
import { allow } from '../people/allow';
import { countDatasets, datasetByRef, uploadById, vintageOfBytes } from './lineage.queries';
import type { ParsedUpload } from './parse';
import { modelMayUse } from './read';
import { parsed, waitingUpload } from './upload';
import { futureFigures, storedTwice } from './vintage-rules';

/** Notes kept in the entry; the rest is counted. */
const mostNotes = 40;

const capped = (notes: readonly Note[]): Note[] =>
	notes.length <= mostNotes
		? [...notes]
		: [...notes.slice(0, mostNotes), { code: 'more', message: `${notes.length - mostNotes} more notes.` }];

/** Every column of the file is spoken of, and no other. */
const matchColumns = (file: ParsedUpload, columns: readonly ColumnTaken[]): void => {
	const names = new Set(file.table.columns.map(({ name }) => name));
	const words = new Set(file.leftOut.map(({ name }) => name));
	const issues: UploadIssue[] = columns.flatMap(({ column, role }, i) =>
		names.has(column) || (words.has(column) && role === 'left-out')
			? []
			: [uploadIssue('column-unknown', [column], { pointer: `/columns/${i}/column` })]
	);
	const said = new Set(columns.map(({ column }) => column));
	const silent = [...names].filter((name) => !said.has(name));
	if (issues.length > 0) throw new Invalid(issues);
	if (silent.length > 0)
		throw new Invalid([{ pointer: '/columns', message: `Say of ${silent.join(', ')} whether it is used.` }]);
};

/** The figures that are stored: columns in use, in the order of the file. How the file was read is kept beside them. */
const usedTable = (table: ParsedTable, columns: readonly ColumnTaken[]): ParsedTable => {
	const used = new Set(columns.filter(({ role }) => role !== 'left-out').map(({ column }) => column));
	return { ...table, columns: table.columns.filter(({ name }) => used.has(name)), notes: [] };
};

const columnPayload = (
	{ column, role, unit, source, code, vintageDate, seasonal, notes }: ColumnTaken,
	day: string
) => {
	if (role === 'left-out' || unit === undefined || source === undefined) return { name: column, role };
	const named = code ?? column;
	return {
		name: column,
		role,
		series: seriesId(source, named),
		unit,
		source,
		code: named,
		vintageDate: vintageDate || day,
		seasonal,
		...(notes === undefined ? {} : { notes })
	};
};

/** The dataset that gets the vintage: a new one, or one the model may use. */
const datasetOf = (
	tx: Tx,
	model: string,
	ref: string | undefined
): { ref: string; n: number; fresh: boolean } => {
	if (ref === undefined)
		return {
			ref: reference('dataset', Number(tx.first(countDatasets(tx.q))?.n ?? 0) + 1),
			n: 1,
			fresh: true
		};
	const row = tx.first(datasetByRef(tx.q, ref));
	if (!row || !modelMayUse(tx, model, ref)) throw new Absent(`There is no dataset ${ref} of ${model}.`);
	return { ref, n: row.vintages + 1, fresh: false };
};

const checkDates = (ctx: Ctx, input: VintageTaken): void => {
	const today = ctx.now().toISOString().slice(0, 10);
	const issues = [
		{ pointer: '/vintageDate', day: input.vintageDate },
		...input.columns.map(({ vintageDate }, i) => ({ pointer: `/columns/${i}/vintageDate`, day: vintageDate }))
	].filter(({ day }) => day !== undefined && day > today);
	if (issues.length > 0)
		throw new Invalid(
			issues.map(({ pointer }) => ({ pointer, message: 'A vintage date lies in the past or is today.' }))
		);
};

const refuseUnread = (
	ctx: Ctx,
	actor: Actor,
	model: string,
	size: number,
	issues: readonly UploadIssue[]
): never => {
	ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'dataset.store', { model });
		record(ctx, tx, actor, grant, {
			type: 'upload.refused',
			subjects: [model],
			payload: { model, code: issues[0]!.code, issues: issues.length, size }
		});
	});
	throw new Invalid(issues);
};

/**
 * Stores a previewed file as a vintage: exact bytes, the table read from them, the lineage of each column, in one
 * transaction with its entry. Opens a dataset where none is named.
 * @returns its reference, `D-0051/2`
 * @throws Invalid with codes such as `changed`, `same-file`, `vintage-twice`, `future`; Absent, Refused, Conflict
 */
export const confirmVintage = async (
	ctx: Ctx,
	actor: Actor,
	model: string,
	given: VintageInput
): Promise<string> => {
	allow(ctx, ctx.read, actor, 'dataset.store', { model });
	const input = taken(vintageInputSchema, given);
	checkDates(ctx, input);
	const upload = waitingUpload(ctx, actor, input.upload, model);
	if (upload.sha256 !== input.sha256) throw new Invalid([uploadIssue('changed', [], { pointer: '/sha256' })]);
	const file = await parsed(ctx, upload.bytes, input.choices);
	if (file.state !== 'parsed') return refuseUnread(ctx, actor, model, upload.size, file.issues);
	matchColumns(file, input.columns);
	const table = usedTable(file.table, input.columns);
	const columns = input.columns.map((column) => columnPayload(column, input.vintageDate));
	const future = futureFigures(table, columns);
	if (future.length > 0) throw new Invalid(future);
	return ctx.write((tx) => {
		const grant = allow(ctx, tx, actor, 'dataset.store', { model });
		// Read again inside the transaction: the upload may have been confirmed or discarded meanwhile.
		const bytes = tx.first(uploadById(tx.q, upload.id))?.bytes;
		if (!bytes) throw new Conflict('This upload is not waiting any more. Send the file again.');
		if (digestOf(bytes) !== input.sha256)
			throw new Invalid([uploadIssue('changed', [], { pointer: '/sha256' })]);
		const same = tx.first(vintageOfBytes(tx.q, upload.sha256, model));
		if (same) throw new Invalid([uploadIssue('same-file', [same.ref])]);
		const dataset = datasetOf(tx, model, input.dataset);
		const twice = storedTwice(ctx, tx, dataset.ref, table, columns);
		if (twice.length > 0) throw new Invalid(twice);
		if (dataset.fresh)
			record(ctx, tx, actor, grant, {
				type: 'dataset.opened',
				subjects: [model, dataset.ref],
				payload: { dataset: dataset.ref, model, name: input.name ?? upload.file_name }
			});
		const vintage = part(dataset.ref, dataset.n);
		record(ctx, tx, actor, grant, {
			type: 'vintage.stored',
			subjects: [model, dataset.ref, vintage],
			payload: {
				vintage,
				dataset: dataset.ref,
				n: dataset.n,
				model,
				sha256: ctx.blobs.put(tx, bytes),
				table: ctx.blobs.put(tx, Buffer.from(canonical(table))),
				size: bytes.length,
				media: file.media,
				fileName: upload.file_name,
				vintageDate: input.vintageDate,
				choices: input.choices,
				frequency: table.frequency,
				from: table.periods[0]!,
				to: table.periods.at(-1)!,
				observations: table.periods.length,
				columns,
				notes: capped(file.table.notes)
			}
		});
		tx.remove('upload', { id: upload.id });
		return vintage;
	});
};
