import js from '@eslint/js';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

export default ts.config(
	{
		ignores: ['build/', '**/.svelte-kit/', '.data/', 'test-results/', 'static/'],
	},
	js.configs.recommended,
	...ts.configs.recommendedTypeChecked,
	...svelte.configs.recommended,
	{
		languageOptions: {
			globals: { ...globals.browser, ...globals.node },
			parserOptions: {
				projectService: true,
				extraFileExtensions: ['.svelte'],
				tsconfigRootDir: import.meta.dirname,
			},
		},
		linterOptions: { reportUnusedDisableDirectives: 'error' },
		rules: {
			eqeqeq: ['error', 'always'],
			'no-console': 'error',
			'@typescript-eslint/consistent-type-imports': [
				'error',
				{ fixStyle: 'inline-type-imports', disallowTypeAnnotations: false },
			],
			// The text of a shared document is read with `toString()`.
			'@typescript-eslint/no-base-to-string': [
				'error',
				{ ignoredTypeNames: ['Error', 'URL', 'YText'] },
			],
			'@typescript-eslint/no-floating-promises': 'error',
			'@typescript-eslint/no-unnecessary-condition': 'error',
			'@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
			'@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
			'@typescript-eslint/switch-exhaustiveness-check': [
				'error',
				{ considerDefaultExhaustiveForUnions: true },
			],
		},
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts'],
		languageOptions: { parserOptions: { parser: ts.parser, svelteConfig } },
		rules: {
			// Addresses are written as they are: the product is always served from the root of its host.
			'svelte/no-navigation-without-resolve': 'off',
			// The rule cannot tell a set that a template reads from one that only a method uses.
			'svelte/prefer-svelte-reactivity': 'off',
		},
	},
	{
		// Yjs alone can leave updates waiting for each other.
		files: ['src/**/*.ts', 'src/**/*.svelte', 'server/**/*.ts'],
		ignores: ['src/lib/note/take-updates.ts', '**/*.test.ts'],
		rules: {
			'no-restricted-properties': [
				'error',
				...['applyUpdate', 'applyUpdateV2'].map((property) => ({
					object: 'Y',
					property,
					message: 'Use takeUpdates of $lib/note/take-updates.',
				})),
			],
		},
	},
	{
		// Scripts that run before anything is installed; their JSDoc casts are checked by the compiler, which the rules
		// about `any` do not see.
		files: ['**/*.mjs', '*.config.js'],
		rules: {
			'@typescript-eslint/no-unsafe-argument': 'off',
			'@typescript-eslint/no-unsafe-assignment': 'off',
			'@typescript-eslint/no-unsafe-call': 'off',
			'@typescript-eslint/no-unsafe-member-access': 'off',
			'@typescript-eslint/no-unsafe-return': 'off',
			'@typescript-eslint/no-unnecessary-condition': 'off',
		},
	},
	{
		// TypeScript itself knows which names exist.
		files: ['**/*.ts', '**/*.svelte', '**/*.svelte.ts', '**/*.mjs'],
		rules: { 'no-undef': 'off' },
	},
);
