import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

/** Writes the command line beside the built server. */
export default defineConfig({
	build: {
		ssr: 'src/cli/main.ts',
		outDir: 'build',
		emptyOutDir: false,
		sourcemap: true,
		rolldownOptions: { output: { entryFileNames: 'cli.js', chunkFileNames: 'cli-[hash].js' } }
	},
	resolve: { alias: { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) } },
	publicDir: false
});
