import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { describe, expect, test } from 'vitest';

const root = resolve(import.meta.dirname, '..');
const src = join(root, 'src');

const files = readdirSync(src, { recursive: true, encoding: 'utf8', withFileTypes: true })
	.filter((entry) => entry.isFile() && /\.(ts|svelte)$/.test(entry.name))
	.map((entry) => join(entry.parentPath, entry.name));

/** The room a file stands in: the first folder that means something. */
const roomOf = (file: string): string => {
	const [first, second, third] = relative(src, file).split('/');
	if (first !== 'lib') return first === 'routes' || first === 'cli' ? first : 'entrance';
	if (second !== 'server') return second!;
	return third!.replace(/\.ts$/, '');
};

/** Small files beside the rooms that every server room may use. */
const shared = new Set(['start-fault', 'clock']);

const importPattern =
	/(?:import|export)\s+(type\s+)?(?:[^'";]*?\sfrom\s+)?['"]([^'"]+)['"]|import\(\s*['"]([^'"]+)['"]\s*\)/g;

interface Import {
	readonly from: string;
	readonly what: string;
	readonly typeOnly: boolean;
}

const importsOf = (file: string): Import[] =>
	[...readFileSync(file, 'utf8').matchAll(importPattern)].map(([, type, what, dynamic]) => ({
		from: file,
		what: (what ?? dynamic)!,
		typeOnly: type !== undefined
	}));

/** The room an import reaches, or undefined for a package. */
const target = ({ from, what }: Import): string | undefined => {
	if (what.startsWith('$lib/')) return roomOf(join(src, 'lib', `${what.slice(5)}`));
	if (what.startsWith('.')) return roomOf(resolve(dirname(from), what));
	return undefined;
};

const guide = readFileSync(join(root, 'DEVELOPERS.md'), 'utf8');

const table = new Map(
	guide
		.split('<!-- import table -->')[1]!
		.split('<!-- end -->')[0]!
		.split('\n')
		.filter((line) => line.startsWith('| ') && !/^\| (room|---)/.test(line))
		.map((line) => {
			const [, room, allowed] = line.split('|').map((cell) => cell.trim());
			return [room!, new Set(allowed!.split(' ').map((word) => (word === '+' ? room! : word)))] as const;
		})
);

const all = files.flatMap(importsOf);

describe('architecture', () => {
	test('there are imports to judge', () => {
		expect(files.length).toBeGreaterThan(100);
		expect(all.length).toBeGreaterThan(files.length);
	});

	test('imports run one way, as the table of the guide says', () => {
		const breaches = all.flatMap((one) => {
			const room = roomOf(one.from);
			const to = target(one);
			if (to === undefined || room === 'entrance' || one.what.endsWith('.css')) return [];
			const breach = `${relative(root, one.from)} -> ${one.what}`;
			if (one.what.endsWith('package.json')) return room === 'boot' ? [] : [breach];
			// What a verb is given is described once; every server room may name its types.
			if (shared.has(to) && one.from.includes('/server/')) return [];
			if ((to === 'context' || to === 'config') && (one.typeOnly || room === 'boot')) return [];
			if (room === 'context') return one.typeOnly ? [] : [breach];
			if (room === 'config') return [breach];
			const allowed = table.get(room);
			if (!allowed) return [`${relative(root, one.from)}: room "${room}" stands in no row of the table`];
			return allowed.has(to) ? [] : [breach];
		});
		expect(breaches).toEqual([]);
	});

	test('routes reach no queries', () => {
		expect(all.filter(({ from, what }) => roomOf(from) === 'routes' && /\.queries$/.test(what))).toEqual([]);
	});

	test('each risky package has one door', () => {
		const doors: Record<string, RegExp> = {
			lucia: /auth\/sessions?\.ts$|auth\/lucia\.ts$/,
			hucre: /lineage\/xlsx\.ts$/,
			'@node-rs/argon2': /auth\/passwords?\.ts$/,
			jstat: /econometrics\//,
			'ml-matrix': /econometrics\//,
			piscina: /runs\/pool\.ts$/,
			canonicalize: /chain\/|battery\//
		};
		const breaches = all.filter(({ from, what }) => {
			const door = Object.entries(doors).find(([name]) => what === name || what.startsWith(`${name}/`));
			return door && !door[1].test(from);
		});
		expect(breaches.map(({ from, what }) => `${relative(root, from)} -> ${what}`)).toEqual([]);
	});

	test('no code starts processes, evaluates text or fetches', () => {
		const forbidden = /child_process|\beval\(|new Function\(|['"]node:vm['"]/;
		expect(files.filter((file) => forbidden.test(readFileSync(file, 'utf8')))).toEqual([]);
	});

	test('no file is a drawer for everything', () => {
		expect(files.filter((file) => /\/(utils?|helpers?|misc|common)\.(ts|svelte)$/.test(file))).toEqual([]);
	});

	test('every production package has a row in the guide that says why it is there', () => {
		const { dependencies } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as {
			dependencies: Record<string, string>;
		};
		const rows = guide.split('## Packages')[1] ?? '';
		expect(Object.keys(dependencies).filter((name) => !rows.includes(`| ${name} |`))).toEqual([]);
	});

	test('used packages are declared, declared packages are used', () => {
		const manifest = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as {
			dependencies: Record<string, string>;
		};
		const css = readFileSync(join(src, 'app.css'), 'utf8');
		const used = new Set(
			all.map(({ what }) =>
				what
					.split('/')
					.slice(0, what.startsWith('@') ? 2 : 1)
					.join('/')
			)
		);
		expect(
			Object.keys(manifest.dependencies).filter((name) => !used.has(name) && !css.includes(name))
		).toEqual([]);
	});
});
