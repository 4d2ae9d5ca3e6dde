import { fileURLToPath } from 'node:url';
import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { svelteTesting } from '@testing-library/svelte/vite';
import type { Plugin, UserConfig } from 'vite';
import { defineConfig } from 'vitest/config';

/** Before minifying; higher: fewer files, and more in them that a page does not need. */
const SMALLEST_FILE_BYTES = 10_000;

const from = (path: string) => fileURLToPath(new URL(path, import.meta.url));

/**
 * Splits what the pages share into few files: of fifty small ones each costs its headers and is compressed by
 * itself. Modules go together that the same pages need; crumbs join their nearest neighbour.
 */
const fewFiles: Plugin = {
	name: 'few-files',
	applyToEnvironment: ({ name }) => name === 'client',
	outputOptions: (options) => ({
		...options,
		// The names of such files list their pages; the hash alone is enough.
		assetFileNames: '_app/immutable/assets/[hash][extname]',
		codeSplitting: {
			groups: [
				{
					name: 'shared',
					// Not what the start of the application needs too: it would carry pages' parts to every page.
					test: /[\\/]src[\\/]lib[\\/]/,
					minShareCount: 2,
					entriesAware: true,
					entriesAwareMergeThreshold: SMALLEST_FILE_BYTES
				}
			]
		}
	})
};

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
				plugins: [tailwindcss(), sveltekit(), fewFiles],
				worker: { format: 'es' },
				test: {
					expect: { requireAssertions: true },
					// Vitest leaves one core free by itself, which on two halves the speed.
					maxWorkers: 2,
					projects: [
						{
							extends: true,
							test: {
								name: 'server',
								environment: 'node',
								setupFiles: ['tests/fixtures/seed.ts'],
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
