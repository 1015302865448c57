// Makes sure that what a command needs is there: packages, the build, a browser. Judges by content, never by time.
// Node built-ins only: this runs before anything is installed.
import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = resolve(dirname(fileURLToPath(import.meta.url)), '..');
const say = (/** @type {string} */ words) => process.stderr.write(`${words}\n`);

/** @param {string} path @returns {string[]} */
const filesBelow = (path) => {
	if (!existsSync(path)) return [];
	if (statSync(path).isFile()) return [path];
	return readdirSync(path, { withFileTypes: true })
		.sort((a, b) => (a.name < b.name ? -1 : 1))
		.flatMap((entry) => filesBelow(join(path, entry.name)));
};

/** @param {string[]} paths SHA-256 over names and bytes, and this Node's version. */
const digest = (paths) => {
	const hash = createHash('sha256').update(process.version);
	for (const file of paths.flatMap((path) => filesBelow(join(root, path)))) {
		hash.update(`\0${relative(root, file)}\0`).update(readFileSync(file));
	}
	return hash.digest('hex');
};

/** @param {string} stamp @param {string} wanted */
const isCurrent = (stamp, wanted) => existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted;

/** @param {string} command @param {string[]} args @param {NodeJS.ProcessEnv} [env] */
const run = (command, args, env = process.env) => {
	const { status, error } = spawnSync(command, args, { cwd: root, stdio: ['ignore', 2, 2], env });
	if (error || status !== 0) {
		say(`${command} ${args.join(' ')} failed${error ? `: ${error.message}` : ''}.`);
		process.exit(status || 1);
	}
};

const isRoot = process.getuid?.() === 0;
const hasApt = existsSync('/usr/bin/apt-get');

/** @param {string[]} packages @param {string} why */
const installDebian = (packages, why) => {
	const command = `apt-get install -y --no-install-recommends ${packages.join(' ')}`;
	if (!isRoot || !hasApt) return say(`${why} As an administrator, run: ${command}`);
	say(`${why} Installing ${packages.join(', ')}.`);
	run('apt-get', ['update']);
	run('apt-get', ['install', '-y', '--no-install-recommends', ...packages]);
};

/** better-sqlite3 is compiled at install. */
const ensureCompiler = () => {
	const missing = ['python3', 'make', 'g++'].filter(
		(tool) => spawnSync(tool, ['--version'], { stdio: 'ignore' }).status !== 0
	);
	if (missing.length > 0)
		installDebian(missing, `The SQLite driver is compiled here and needs ${missing.join(', ')}.`);
};

const ensurePackages = () => {
	const wanted = digest(['package-lock.json', '.npmrc']);
	const stamp = join(root, 'node_modules', '.keelbook-installed');
	if (isCurrent(stamp, wanted)) return;
	ensureCompiler();
	say('Installing packages (a few minutes the first time: the SQLite driver is compiled).');
	// Node's own headers, where this installation has them: without them the driver's build would download some.
	const prefix = resolve(dirname(process.execPath), '..');
	const headers = existsSync(join(prefix, 'include/node/node_version.h'))
		? { npm_config_nodedir: prefix }
		: {};
	run('npm', ['ci', '--no-audit', '--no-fund'], { ...process.env, ...headers });
	writeFileSync(stamp, wanted);
};

const ensureBuild = () => {
	const sources = ['src', 'static', 'migrations', 'policies', 'package-lock.json', 'package.json'];
	const settings = readdirSync(root).filter((name) =>
		/^(svelte|vite|tailwind|tsconfig).*\.(js|ts|json)$/.test(name)
	);
	const wanted = digest([...sources, ...settings.sort()]);
	const stamp = join(root, 'build', '.keelbook-built');
	if (isCurrent(stamp, wanted)) return;
	say('Building.');
	run('npm', ['run', '--silent', 'build']);
	mkdirSync(dirname(stamp), { recursive: true });
	writeFileSync(stamp, wanted);
};

/** Debian's Chromium where it can be had; else the tests take the browser inside an npm package. */
const ensureBrowser = () => {
	if (existsSync('/usr/bin/chromium')) return;
	if (isRoot && hasApt) installDebian(['chromium'], "The browser tests use Debian's Chromium.");
};

const asked = process.argv.slice(2);
process.umask(0o022);
try {
	execFileSync('npm', ['--version'], { stdio: 'ignore' });
} catch {
	say('npm is not on the path; install Node.js 20 or newer with npm.');
	process.exit(1);
}
ensurePackages();
if (asked.includes('build')) ensureBuild();
if (asked.includes('browser')) ensureBrowser();
