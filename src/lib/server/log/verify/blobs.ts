import { digestOf } from '$lib/chain/digest';
import type { Envelope } from '$lib/chain/entry';
import { blobSchemas } from '$lib/domain/events/digest';
import { z } from 'zod';
import { payloadSchema } from '../record';
import type { Findings } from './report';
import type { Source } from './source';

/** What an optional, read-only or defaulted schema wraps. */
const innerOf = (schema: z.core.$ZodType): z.core.$ZodType | undefined =>
	(schema._zod.def as { readonly innerType?: z.core.$ZodType }).innerType;

/** The digests of blobs in a value, found where its schema says so. */
const named = function* (schema: z.core.$ZodType, value: unknown): Generator<string> {
	if (value === undefined || value === null) return;
	if (blobSchemas.has(schema)) yield value as string;
	else if (innerOf(schema)) yield* named(innerOf(schema)!, value);
	else if (schema instanceof z.ZodArray)
		for (const item of value as unknown[]) yield* named(schema.element, item);
	else if (schema instanceof z.ZodObject)
		for (const [key, member] of Object.entries(schema.shape))
			yield* named(member as z.core.$ZodType, (value as Record<string, unknown>)[key]);
	else if (schema instanceof z.ZodUnion)
		for (const option of schema.options) if (z.safeParse(option, value).success) yield* named(option, value);
};

/** The blobs an entry names. */
export const blobsNamed = ({ type, v, payload }: Envelope): string[] => {
	const schema = payloadSchema(type, v);
	return schema ? [...named(schema, payload)] : [];
};

/** Every stored blob has the digest it is stored under, and its length. Returns their number. */
export const checkBlobs = (source: Source, findings: Findings): number => {
	let count = 0;
	for (const { sha256, size, bytes } of source.blobs()) {
		count++;
		if (digestOf(bytes) !== sha256) findings.fault('blob', sha256, 'digest: its bytes do not match');
		else if (bytes.length !== size)
			findings.fault('blob', sha256, `size: it has ${bytes.length} bytes, not ${size}`);
	}
	return count;
};
