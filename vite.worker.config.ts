import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

/** Writes the worker that computes runs and parses uploads beside the built server. */
export default defineConfig({
	build: {
		ssr: 'src/lib/server/runs/worker.ts',
		outDir: 'build',
		emptyOutDir: false,
		sourcemap: true,
		rolldownOptions: { output: { entryFileNames: 'worker.js', chunkFileNames: 'worker-[hash].js' } }
	},
	resolve: { alias: { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) } },
	publicDir: false
});
