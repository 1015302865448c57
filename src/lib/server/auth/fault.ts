import type { Failure } from '$lib/domain/events/people';

/**
 * Why a ceremony failed: for the log and for tests. People outside read one sentence whatever the reason.
 */
export class AuthFault extends Error {
	override readonly name = 'AuthFault';
	constructor(
		readonly reason: Failure,
		message: string
	) {
		super(message);
	}
}
