import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	// Fonts stay files, so that the content policy needs no data: source.
	build: { assetsInlineLimit: 0 },
	test: {
		projects: [
			{
				extends: true,
				test: {
					name: 'unit',
					include: ['tests/**/*.test.ts'],
					exclude: ['tests/e2e/**', 'tests/routes/**', 'tests/faults/**'],
					testTimeout: 30_000
				}
			},
			{
				extends: true,
				test: {
					name: 'server',
					include: ['tests/routes/**/*.test.ts', 'tests/faults/**/*.test.ts'],
					fileParallelism: false,
					testTimeout: 120_000,
					hookTimeout: 120_000
				}
			},
			{
				extends: true,
				test: {
					name: 'e2e',
					include: ['tests/e2e/**/*.test.ts'],
					fileParallelism: false,
					testTimeout: 120_000,
					hookTimeout: 120_000
				}
			}
		]
	}
});
