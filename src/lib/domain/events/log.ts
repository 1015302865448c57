import { z } from 'zod';
import { event } from './event';

/** Events of the log itself. */
export const logEvents = {
	'log.opened': event(1, {
		1: z.strictObject({
			demo: z.boolean(),
			/** Verifier key of the checkpoints, without its name: base64 of the algorithm byte and the key. */
			publicKey: z.string(),
			/** Address the register answers at; passkeys are bound to it. */
			address: z.string(),
			institution: z.string()
		})
	}),
	/** Which program serves the register from here on. */
	'app.started': event(1, {
		1: z.strictObject({
			version: z.string(),
			engine: z.string(),
			node: z.string(),
			sqlite: z.string(),
			/** Number of migrations that made the tables. */
			schema: z.int().min(0)
		})
	})
} as const;
