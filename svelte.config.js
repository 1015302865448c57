import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** The digest of the one style attribute that SvelteKit itself writes (its route announcer). */
const announcerStyle = "'sha256-S8qMpvofolR8Mpjy4kQvEm7m1q8clzU4dfDH0AmvZjo='";

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	kit: {
		adapter: adapter({ precompress: true }),
		csp: {
			mode: 'nonce',
			directives: {
				'default-src': ['none'],
				'script-src': ['self'],
				'style-src': ['self', 'unsafe-hashes', announcerStyle],
				'img-src': ['self'],
				'font-src': ['self'],
				'connect-src': ['self'],
				'form-action': ['self'],
				'base-uri': ['none'],
				'frame-ancestors': ['none']
			}
		},
		typescript: {
			// The generated file covers only src, tests and vite.config: add what else is ours.
			config: (config) => ({
				...config,
				include: [...config.include, '../migrations/**/*.ts', '../tailwind.config.ts', '../vite.*.config.ts']
			})
		}
	}
};
