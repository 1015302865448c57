import { z } from 'zod';
import { blobDigest, digest } from './digest';
import { event } from './event';

/** Events of the policy room. */
export const policyEvents = {
	'policy.proposed': event(1, {
		1: z.strictObject({
			/** Digest of the policy: of the canonical document with the bank's own values and reasons. */
			policy: digest(),
			release: z.string(),
			/** Blob of that document. */
			document: blobDigest().optional(),
			/** Paths of the lines whose value differs from the release; reasons stand in the document. */
			changed: z.array(z.string())
		})
	}),
	'policy.adopted': event(1, {
		1: z.strictObject({
			policy: digest(),
			release: z.string(),
			document: blobDigest().optional(),
			/** Folio of the proposal; absent when the register adopts the released policy as it opens. */
			proposal: z.int().optional()
		})
	})
} as const;
