import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
export default {
	preprocess: vitePreprocess(),
	kit: {
		adapter: adapter(),
		// Programs send no Origin and Kit would refuse them before any hook runs.
		// The check itself is made in src/lib/server/http/handles/origin.ts.
		csrf: { trustedOrigins: ['*'] },
		csp: {
			mode: 'nonce',
			directives: {
				'default-src': ['self'],
				'script-src': ['self'],
				'style-src': ['self'],
				// Widths of bars and positions of marks are figures: they are style attributes.
				'style-src-attr': ['unsafe-inline'],
				'img-src': ['self', 'data:', 'blob:'],
				'font-src': ['self'],
				'connect-src': ['self'],
				'worker-src': ['self'],
				'object-src': ['none'],
				'base-uri': ['self'],
				'form-action': ['self'],
				'frame-ancestors': ['none']
			}
		},
		// An error page stands under another address than the page that it is drawn from: relative paths miss.
		paths: { relative: false },
		typescript: {
			config: (config) => ({
				...config,
				include: [...config.include, '../.config/**/*.js', '../tests/**/*.ts', '../*.config.*']
			})
		}
	}
};
