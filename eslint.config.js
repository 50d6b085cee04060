import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

/** Forbids imports that match the patterns, so that arrows between rooms point one way. */
const forbid = (files, group, message) => ({
	files,
	rules: { 'no-restricted-imports': ['error', { patterns: [{ group, message }] }] }
});

export default ts.config(
	{
		ignores: [
			'build/',
			'build-workers/',
			'.svelte-kit/',
			'.local/',
			'node_modules/',
			'test-results/',
			'playwright-report/'
		]
	},
	js.configs.recommended,
	...ts.configs.recommended,
	...svelte.configs.recommended,
	prettier,
	...svelte.configs.prettier,
	{ languageOptions: { globals: { ...globals.browser, ...globals.node } } },
	{
		files: ['**/*.ts', '**/*.svelte', '**/*.svelte.ts'],
		languageOptions: {
			parserOptions: {
				// Kit keeps the service worker out of its tsconfig: it sees another global scope.
				projectService: { allowDefaultProject: ['src/service-worker.ts'] },
				extraFileExtensions: ['.svelte'],
				parser: ts.parser,
				svelteConfig
			}
		},
		rules: {
			'@typescript-eslint/no-floating-promises': 'error',
			'@typescript-eslint/no-explicit-any': 'error',
			'@typescript-eslint/no-unused-vars': [
				'error',
				{ argsIgnorePattern: '^_', varsIgnorePattern: '^_' }
			],
			'no-undef': 'off',
			'svelte/no-navigation-without-resolve': 'off'
		}
	},
	forbid(
		['src/lib/sky/**/*.ts'],
		[
			'$app/*',
			'$env/*',
			'$lib/*',
			'**/domain/**',
			'**/server/**',
			'**/api/**',
			'**/components/**',
			'pg',
			'drizzle-orm',
			'node:*'
		],
		'sky/ is pure: no framework, environment, database, other room or Node.js module.'
	),
	{
		files: ['src/lib/sky/**/*.ts'],
		ignores: ['**/*.test.ts'],
		rules: {
			'no-restricted-properties': [
				'error',
				{ object: 'Date', property: 'now', message: 'sky/ is pure: pass the instant in.' },
				{ object: 'Math', property: 'random', message: 'sky/ is pure: pass the draw in.' }
			],
			'no-restricted-globals': ['error', 'fetch', 'process']
		}
	},
	{ files: ['src/lib/sky/**/*.test.ts'], rules: { 'no-restricted-imports': 'off' } },
	forbid(
		['src/lib/domain/**/*.ts'],
		['$app/*', '$env/*', '$lib/server/*', '$lib/api/*', '$lib/components/*', '**/server/**'],
		'domain/ may use sky/ only.'
	),
	forbid(
		['src/lib/server/**/*.ts'],
		['@sveltejs/kit', '$app/*', '$env/*', '$lib/api/*', '$lib/components/*'],
		'Services never import the framework: routes map their results and errors.'
	),
	forbid(
		['src/lib/components/**', 'src/lib/api/**'],
		['$lib/server/*', '**/server/**', '$env/*'],
		'Browser code reaches the server through api/ only.'
	),
	{
		// Auth.js's SvelteKit binding stands behind server/auth/, and http/ answers in Kit's terms.
		files: ['src/lib/server/auth/**/*.ts', 'src/lib/server/http/**/*.ts'],
		rules: { 'no-restricted-imports': 'off' }
	}
);
