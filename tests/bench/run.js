/** Runs a measurement of this folder: `node tests/bench/run.js append`. Vite compiles it, aliases and globs included. */
import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

const [name = '', ...args] = process.argv.slice(2);
if (!/^[a-z-]+$/.test(name)) {
	process.stderr.write('Usage: node tests/bench/run.js <measurement> …\n');
	process.exit(64);
}
const root = fileURLToPath(new URL('../..', import.meta.url));
const { module } = await runnerImport(`${root}tests/bench/${name}.ts`, {
	root,
	configFile: false,
	resolve: { alias: { $lib: `${root}src/lib` } }
});
await module.default(args);
