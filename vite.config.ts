import { fileURLToPath } from 'node:url';
import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { svelteTesting } from '@testing-library/svelte/vite';
import type { UserConfig } from 'vite';
import { defineConfig } from 'vitest/config';

const from = (path: string) => fileURLToPath(new URL(path, import.meta.url));

/** The programs that run outside Kit: command line, start, workers. */
const nodePrograms: UserConfig = {
	resolve: { alias: { $lib: from('./src/lib') } },
	publicDir: false,
	build: {
		ssr: true,
		target: 'node20',
		outDir: 'build/node',
		emptyOutDir: true,
		rolldownOptions: {
			input: {
				catchwater: from('./src/cli/catchwater.ts'),
				serve: from('./src/cli/serve.ts'),
				'reading-worker': from('./src/workers/reading-worker.ts')
			}
		}
	}
};

export default defineConfig(({ mode }) =>
	mode === 'node-programs'
		? nodePrograms
		: {
				plugins: [tailwindcss(), sveltekit()],
				worker: { format: 'es' },
				test: {
					expect: { requireAssertions: true },
					projects: [
						{
							extends: true,
							test: {
								name: 'server',
								environment: 'node',
								include: ['tests/unit/**/*.test.ts'],
								exclude: ['tests/unit/**/*.svelte.test.ts'],
								testTimeout: 30_000,
								hookTimeout: 60_000
							}
						},
						{
							extends: true,
							plugins: [svelteTesting()],
							test: {
								name: 'ui',
								environment: 'jsdom',
								include: ['tests/unit/**/*.svelte.test.ts']
							}
						}
					]
				}
			}
);
