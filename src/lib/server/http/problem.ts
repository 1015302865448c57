import type { Issue } from '$lib/domain/faults';

export interface Problem {
	readonly status: number;
	readonly title: string;
	readonly detail: string;
	readonly rule?: string;
	readonly errorId?: string;
	readonly issues?: readonly Issue[];
}

/** A problem document of RFC 9457; `issues` holds a JSON pointer per field. */
export const problem = (said: Problem): Response =>
	new Response(JSON.stringify({ type: 'about:blank', ...said }), {
		status: said.status,
		headers: {
			'content-type': 'application/problem+json',
			...(said.status === 401 ? { 'www-authenticate': 'Bearer' } : {})
		}
	});
