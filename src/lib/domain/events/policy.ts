import { z } from 'zod';
import { blobDigest, digest } from './digest';
import { event } from './event';

/** A bank's own reason for a line it keeps or changes; the changed values stand in the document. */
const ownReason = z.strictObject({ line: z.string(), changed: z.boolean(), reason: z.string() });

/** Events of the policy room. */
export const policyEvents = {
	'policy.proposed': event(1, {
		1: z.strictObject({
			/** Digest of the policy: of the released file, or of the canonical document where lines were changed. */
			policy: digest(),
			release: z.string(),
			/** Blob of the canonical document, where lines were changed. */
			document: blobDigest().optional(),
			reasons: z.array(ownReason)
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
