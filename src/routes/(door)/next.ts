/** First parts of the addresses a sign-in may lead to. */
const areas = new Set(['', 'models', 'runs', 'data', 'policy', 'people', 'account', 'log']);

/** Where to go after signing in: a path of this register, or the desk. Never another host. */
export const nextPath = (asked: string | null): string => {
	if (asked === null || !/^\/(?![/\\])[\x21-\x7e]{0,512}$/.test(asked)) return '/';
	let url: URL;
	try {
		url = new URL(asked, 'http://register.invalid');
	} catch {
		return '/';
	}
	const same = url.origin === 'http://register.invalid' && url.pathname + url.search === asked;
	return same && areas.has(url.pathname.split('/')[1] ?? '') ? asked : '/';
};
