import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	kit: {
		adapter: adapter({ out: 'build/web', precompress: true }),
		// A style sheet of its own for a few rules costs a slow computer more than the rules.
		inlineStyleThreshold: 4096,
		// Svelte writes measured positions (gauges, cursors) as style attributes, so only scripts are strict.
		csp: {
			mode: 'auto',
			directives: {
				'default-src': ['self'],
				'script-src': ['self'],
				'style-src': ['self', 'unsafe-inline'],
				'img-src': ['self', 'data:'],
				'connect-src': ['self'],
				'object-src': ['none'],
				'base-uri': ['none'],
				'frame-ancestors': ['none'],
				'form-action': ['self'],
			},
		},
		typescript: {
			config: (config) => {
				config.include.push(
					'../server/**/*.ts',
					'../server/**/*.mjs',
					'../tests/**/*.ts',
					'../*.config.ts',
					'../*.config.js',
				);
			},
		},
	},
};
