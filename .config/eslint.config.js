import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from '../svelte.config.js';

export default ts.config(
	{
		ignores: [
			'**/node_modules/',
			'**/.svelte-kit/',
			'**/build/',
			'**/coverage/',
			'**/data/',
			'content/',
			'tests/fixtures/evidence/',
			'tests/browser/results/'
		]
	},
	js.configs.recommended,
	...ts.configs.recommended,
	...svelte.configs.recommended,
	prettier,
	...svelte.configs.prettier,
	{
		languageOptions: { globals: { ...globals.browser, ...globals.node } },
		rules: {
			'no-undef': 'off',
			'no-console': 'error',
			'@typescript-eslint/no-explicit-any': 'error',
			'@typescript-eslint/no-non-null-assertion': 'error',
			'@typescript-eslint/consistent-type-imports': 'error',
			'@typescript-eslint/no-unused-vars': [
				'error',
				{ argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrorsIgnorePattern: '^_' }
			],
			'no-empty': ['error', { allowEmptyCatch: false }]
		}
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts'],
		languageOptions: {
			parserOptions: { extraFileExtensions: ['.svelte'], parser: ts.parser, svelteConfig }
		}
	},
	{
		// The one component that draws HTML, all of it from server/markdown/render.ts.
		files: ['src/lib/components/ui/Prose.svelte'],
		rules: { 'svelte/no-at-html-tags': 'off' }
	},
	{
		// Programs that speak through standard output.
		files: ['src/cli/**/*.ts', 'tests/run.ts', 'tests/bench/**/*.ts', 'tests/browser/tour.ts'],
		rules: { 'no-console': 'off' }
	}
);
