import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	build: {
		// Small fonts would become data: addresses, which the content security policy refuses.
		assetsInlineLimit: (file) => (/\.(woff2?|ttf)$/.test(file) ? false : undefined),
		// Vite's own browsers, for the server's build too: a style sheet has one address in both.
		cssTarget: ['chrome111', 'edge111', 'firefox114', 'safari16.4'],
	},
	server: {
		proxy: { '/sync': { target: `http://127.0.0.1:${process.env.SYNC_PORT ?? '4174'}`, ws: true } },
	},
	test: {
		// Bounds for a busy machine; a test that needs as long on an idle one says so itself.
		testTimeout: 30_000,
		hookTimeout: 60_000,
		projects: [
			{
				extends: true,
				test: {
					name: 'unit',
					include: [
						'src/**/*.test.ts',
						'server/**/*.test.ts',
						'tests/architecture/**/*.test.ts',
						'tests/references/**/*.test.ts',
					],
				},
			},
			{
				extends: true,
				test: {
					name: 'db',
					include: ['tests/db/**/*.test.ts'],
					// They start the production entry.
					testTimeout: 30_000,
					hookTimeout: 90_000,
					globalSetup: 'tests/support/postgres.ts',
				},
			},
			{
				extends: true,
				test: {
					name: 'sync',
					include: ['tests/sync/**/*.test.ts'],
					// They start, stop and cut processes.
					testTimeout: 60_000,
					hookTimeout: 90_000,
					globalSetup: 'tests/support/postgres.ts',
				},
			},
			{
				extends: true,
				test: {
					name: 'faults',
					include: ['tests/faults/**/*.test.ts'],
					hookTimeout: 120_000,
					setupFiles: 'tests/faults/install-clocks.ts',
				},
			},
		],
	},
});
