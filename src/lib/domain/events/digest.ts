import { z } from 'zod';

const form = /^sha256:[0-9a-f]{64}$/;

/** Schemas that name bytes kept as a blob: the verifier asks that each of them is there. */
export const blobSchemas = z.registry<{ blob: true }>();

/** Any SHA-256 digest, as entries write it. */
export const digest = () => z.string().regex(form, 'Not a SHA-256 digest');

/** The digest of bytes that were put into the blobs in the same transaction. */
export const blobDigest = () => digest().register(blobSchemas, { blob: true });
