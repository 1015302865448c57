/** A method of a route: GET, POST, or a form action. */
export interface Found {
	readonly route: string;
	readonly method: string;
}

type Module = () => Promise<Readonly<Record<string, unknown>>>;

const pages = import.meta.glob('/src/routes/**/+page.svelte');
const actions = import.meta.glob('/src/routes/**/+page.server.ts') as Record<string, Module>;
const endpoints = import.meta.glob('/src/routes/**/+server.ts') as Record<string, Module>;

const verbs = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback'];

const routeOf = (file: string): string => file.replace(/^\/src\/routes/, '').replace(/\/\+[^/]+$/, '') || '/';

/** Every route and method that the tree of routes offers, read from its files. */
export const foundRoutes = async (): Promise<readonly Found[]> => {
	const found: Found[] = Object.keys(pages).map((file) => ({ route: routeOf(file), method: 'GET' }));
	for (const [file, load] of Object.entries(actions)) {
		const { actions: offered = {} } = await load();
		for (const name of Object.keys(offered as object))
			found.push({ route: routeOf(file), method: name === 'default' ? 'POST' : `POST ?/${name}` });
	}
	for (const [file, load] of Object.entries(endpoints)) {
		const module = await load();
		for (const method of verbs) if (method in module) found.push({ route: routeOf(file), method });
	}
	return found;
};
