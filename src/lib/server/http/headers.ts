/** Headers of every answer the application makes; scripts/start.js gives the same to those it never sees. */
export const headers = (origin: string): Readonly<Record<string, string>> => ({
	'x-content-type-options': 'nosniff',
	'referrer-policy': 'same-origin',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin',
	'permissions-policy':
		'publickey-credentials-get=(self), publickey-credentials-create=(self), camera=(), microphone=(), geolocation=(), payment=(), usb=()',
	'cache-control': 'no-store',
	...(origin.startsWith('https:')
		? { 'strict-transport-security': 'max-age=63072000; includeSubDomains' }
		: {})
});

/** Policy for answers that are no page of ours: data, downloads, problem documents. */
export const closedPolicy = "default-src 'none'; frame-ancestors 'none'; base-uri 'none'";

/** Sets what is not set: a route that needs another value has said so already. */
export const dress = (response: Response, origin: string): Response => {
	for (const [name, value] of Object.entries(headers(origin)))
		if (!response.headers.has(name)) response.headers.set(name, value);
	if (!response.headers.has('content-security-policy'))
		response.headers.set('content-security-policy', closedPolicy);
	return response;
};
