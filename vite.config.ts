import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vite';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	server: {
		proxy: { '/sync': { target: `http://127.0.0.1:${process.env.SYNC_PORT ?? '4174'}`, ws: true } },
	},
});
