import type { Page } from 'playwright-core';
import { alive, inaccessible, overflow } from './browser';

/** What is wrong with a page as somebody sees it: one line a fault. */
export type PageFaults = readonly string[];

/** A kind of page: its path with references, numbers and ids left out, and the names of what its address asks. */
export const kindOf = (address: URL): string => {
	const path = address.pathname
		.replace(/\/[MDR]-\d+/g, '/ref')
		.replace(/\/people\/[^/]+$/, '/people/person')
		.replace(/\/\d+(?=\/|$)/g, '/n');
	const asked = [...new Set(address.searchParams.keys())].sort();
	return asked.length > 0 ? `${path}?${asked.join('&')}` : path;
};

const isPage = (address: URL): boolean => !/\.(csv|json|txt)$|\/file$/.test(address.pathname);

/** Addresses of this register that the page links to, files apart from pages; anchors are left out. */
export const linksOn = async (page: Page): Promise<{ pages: URL[]; files: URL[] }> => {
	// The attribute, resolved: links inside drawings hold their address in an object.
	const found = await page
		.locator('a[href]')
		.evaluateAll((all) => all.map((a) => new URL(a.getAttribute('href')!, document.baseURI).href));
	const own = found
		.map((href) => new URL(href))
		.filter(({ origin }) => origin === new URL(page.url()).origin)
		.map((address) => new URL(address.pathname + address.search, address.origin));
	const distinct = [...new Map(own.map((address) => [address.href, address])).values()];
	return { pages: distinct.filter(isPage), files: distinct.filter((address) => !isPage(address)) };
};

const shortCaution = "Supports, and does not replace, the institution's own model-risk governance.";
export const longCaution =
	"Keelbook supports the institution's own model-risk governance. It does not replace it, nor the judgement of qualified staff, nor the rules of the supervisor.";

/** Where the long caution must stand. */
const needsLong = (path: string): boolean => path === '/sign-in' || /^\/runs\/R-\d+$/.test(path);
const atDoor = (path: string): boolean => /^\/(sign-in|enrol|recovery)/.test(path);

const judged = new Set<string>();

/** The acts a page offers: pages of one kind with the same acts are judged by axe once. */
const offerOf = (page: Page): Promise<string> =>
	page
		.locator('main form')
		.evaluateAll((forms) => forms.map((form) => form.getAttribute('action') ?? '').join(' '));

/** Looks at the page that is open: its caution, its width on a telephone, what axe finds. */
export const faultsOn = async (page: Page): Promise<PageFaults> => {
	const address = new URL(page.url());
	const faults: string[] = [];
	const text = await page.locator('body').innerText();
	if (!atDoor(address.pathname) && !text.includes(shortCaution)) faults.push('no caution in the folio line');
	if (needsLong(address.pathname) && !text.includes(longCaution)) faults.push('no long caution');
	if ((await page.locator('h1').count()) !== 1) faults.push('not one main heading');
	const mark = `${kindOf(address)} ${await offerOf(page)}`;
	if (!judged.has(mark)) {
		judged.add(mark);
		faults.push(...(await inaccessible(page)));
	}
	const size = page.viewportSize()!;
	await page.setViewportSize({ width: 390, height: 844 });
	const wider = await overflow(page);
	await page.setViewportSize(size);
	if (wider > 0) faults.push(`${wider} px wider than 390`);
	return faults.map((fault) => `${address.pathname}${address.search}: ${fault}`);
};

/** Opens a page and looks at it; another status than 200 is a fault. */
export const look = async (page: Page, address: URL | string): Promise<PageFaults> => {
	const status = (await page.goto(String(address)))?.status() ?? 0;
	if (status !== 200) return [`${String(address)}: status ${status}`];
	await alive(page);
	return faultsOn(page);
};

export interface Walk {
	readonly kinds: ReadonlySet<string>;
	readonly visited: readonly string[];
	readonly faults: PageFaults;
}

/** Follows every link that somebody is shown, so many pages of a kind, and asks for every file once a kind. */
export const walk = async (
	page: Page,
	from: readonly URL[],
	perKind: (kind: string) => number
): Promise<Walk> => {
	const queue = [...from];
	const counts = new Map<string, number>();
	const seen = new Set<string>();
	const faults: string[] = [];
	const take = (address: URL): boolean => {
		const kind = kindOf(address);
		const before = counts.get(kind) ?? 0;
		if (seen.has(address.href) || before >= perKind(kind)) return false;
		seen.add(address.href);
		counts.set(kind, before + 1);
		return true;
	};
	for (let next = queue.shift(); next; next = queue.shift()) {
		if (!take(next)) continue;
		faults.push(...(await look(page, next)));
		const { pages, files } = await linksOn(page);
		queue.push(...pages);
		for (const file of files.filter(take)) {
			const answer = await page.request.get(file.href);
			if (answer.status() !== 200) faults.push(`${file.pathname}${file.search}: status ${answer.status()}`);
		}
	}
	return { kinds: new Set(counts.keys()), visited: [...seen], faults };
};
