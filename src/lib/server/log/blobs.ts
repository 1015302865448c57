import { digestOf } from '$lib/chain/digest';
import type { Blobs } from '../context';
import type { Handle } from '../db/handle';
import { blobExists, blobOf } from './log.queries';

/** Stored bytes no longer match their digest. */
export class BlobDamaged extends Error {
	override readonly name = 'BlobDamaged';
}

/** Content-addressed bytes in the register's own file, written in the transaction of the entry that names them. */
export const openBlobs = (read: Handle): Blobs =>
	Object.freeze<Blobs>({
		put(tx, bytes) {
			const digest = digestOf(bytes);
			if (!tx.first(blobExists(tx.q, digest)))
				tx.insert('blob', { sha256: digest, size: bytes.length, bytes: Buffer.from(bytes) });
			return digest;
		},
		get(digest) {
			const bytes = read.first<{ bytes: Buffer }>(blobOf(read.q, digest))?.bytes;
			if (bytes && digestOf(bytes) !== digest)
				throw new BlobDamaged(`The bytes of ${digest} do not match it`);
			return bytes;
		}
	});
