const safe = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Whether a request may change something, judged by its origin: for every method but the safe ones, `Origin` must
 * equal the configured origin exactly and `Sec-Fetch-Site`, when sent, be `same-origin`. A bearer token is no ambient
 * authority, so requests that carry one and no cookie need no origin.
 */
export const sameOrigin = (request: Request, origin: string): boolean => {
	if (safe.has(request.method)) return true;
	if (bearer(request) && !request.headers.has('cookie')) return true;
	const site = request.headers.get('sec-fetch-site');
	return request.headers.get('origin') === origin && (site === null || site === 'same-origin');
};

/** Whether the request presents a bearer token. */
export const bearer = (request: Request): boolean =>
	/^bearer /i.test(request.headers.get('authorization') ?? '');
