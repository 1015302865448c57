import js from '@eslint/js';
import { fileURLToPath } from 'node:url';
import { defineConfig, includeIgnoreFile } from 'eslint/config';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

export default defineConfig(
	includeIgnoreFile(fileURLToPath(new URL('./.gitignore', import.meta.url))),
	js.configs.recommended,
	ts.configs.strict,
	svelte.configs.recommended,
	prettier,
	svelte.configs.prettier,
	{
		languageOptions: { globals: { ...globals.browser, ...globals.node } },
		rules: {
			// There is no base path, and addresses arrive as props.
			'svelte/no-navigation-without-resolve': 'off',
			// It takes the reason behind the dash for more codes; svelte-check judges the warnings themselves.
			'svelte/no-unused-svelte-ignore': 'off',
			// TypeScript resolves names itself.
			'no-undef': 'off',
			// Typed arrays are indexed in inner loops where bounds are proved by the loop itself.
			'@typescript-eslint/no-non-null-assertion': 'off'
		}
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts'],
		languageOptions: {
			parserOptions: {
				projectService: true,
				extraFileExtensions: ['.svelte'],
				parser: ts.parser,
				svelteConfig
			}
		}
	}
);
