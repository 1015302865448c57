import type { Actor } from '$lib/domain/actor';
import type { Ctx } from '$lib/server/context';

declare global {
	namespace App {
		interface Locals {
			/** The services of this server: one composition root, made at start. */
			ctx: Ctx;
			/** Who asks; null before sign-in. */
			actor: Actor | null;
			/** Random id that joins an entry to the server's log lines. */
			requestId: string;
		}
		interface Error {
			message: string;
			/** Cited by people when they report a fault. */
			errorId?: string;
			/** The rule that refused, when one did. */
			rule?: string;
		}
	}
}

export {};
