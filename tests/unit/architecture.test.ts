/**
 * Imports point one way: routes, hooks, cli and workers → lib/server → lib/domain. Components and state may
 * import domain, never server. Reads every import under src; a folder that no rule knows fails, too.
 */
import { describe, expect, it } from 'vitest';
import ts from 'typescript';

const sources = import.meta.glob<string>(['/src/**/*.{ts,svelte}', '!/src/**/*.d.ts'], {
	query: '?raw',
	import: 'default',
	eager: true
});

/** A part of the source, in the words of the one rule. */
type Part =
	| 'domain'
	| 'server'
	| 'store'
	| 'components'
	| 'state'
	| 'styles'
	| 'edge'
	| 'messages'
	| 'worker'
	| 'browser worker'
	| 'cli'
	| 'client';

/** What each part may import of our own. */
const MAY_IMPORT: Record<Part, readonly Part[]> = {
	domain: ['domain'],
	store: ['domain', 'server', 'store'],
	server: ['domain', 'server', 'store', 'messages'],
	components: ['domain', 'components', 'state', 'styles'],
	state: ['domain', 'state', 'messages', 'browser worker'],
	styles: ['styles'],
	edge: ['domain', 'server', 'components', 'state', 'styles', 'edge'],
	/** What a worker and its caller say to each other. */
	messages: ['domain'],
	/** Node's worker reads the file itself; a service started it. */
	worker: ['domain', 'messages', 'server'],
	'browser worker': ['domain', 'messages'],
	client: ['domain', 'state'],
	cli: ['domain', 'server', 'cli']
};

/** Leaf libraries that the domain may use: they compute, and know nothing of a platform. */
const DOMAIN_LIBRARIES = ['zod', 'saxes', 'hash-wasm', 'yaml', 'libpg-query', 'marked', 'diff'];

function partOf(path: string): Part | null {
	if (path.startsWith('/src/lib/domain/')) return 'domain';
	if (path.startsWith('/src/lib/server/')) {
		return path.startsWith('/src/lib/server/db/') || /-store(\.ts)?$/.test(path) ? 'store' : 'server';
	}
	if (path.startsWith('/src/lib/components/')) return 'components';
	if (path.startsWith('/src/lib/state/')) return 'state';
	if (path.startsWith('/src/lib/styles/') || path.endsWith('.css')) return 'styles';
	if (/^\/src\/workers\/[\w-]+-messages/.test(path)) return 'messages';
	if (/^\/src\/workers\/browser-/.test(path)) return 'browser worker';
	if (path.startsWith('/src/workers/')) return 'worker';
	if (path.startsWith('/src/cli/')) return 'cli';
	if (/^\/src\/(hooks\.client|service-worker)/.test(path)) return 'client';
	return /^\/src\/(routes\/|params\/|hooks\.server|error\.html|app\.)/.test(path) ? 'edge' : null;
}

/** Where an import of our own leads, as a path from the root; null: a package or a virtual module. */
function resolveOwn(from: string, specifier: string): string | null {
	if (specifier.startsWith('$lib/')) return specifier.replace('$lib', '/src/lib');
	if (!specifier.startsWith('.')) return null;
	return new URL(specifier, `file://${from}`).pathname;
}

/** The specifiers that a file imports: static, dynamic, re-exported, and a worker's address. */
function listImports(path: string, source: string): string[] {
	const scripts = path.endsWith('.svelte')
		? [...source.matchAll(/<script[^>]*>([\s\S]*?)<\/script>/g)].map((match) => match[1] ?? '').join('\n')
		: source;
	const { importedFiles } = ts.preProcessFile(scripts, true, true);
	const workers = [...scripts.matchAll(/new Worker\(\s*new URL\('(\.[^']+)', import\.meta\.url\)/g)].map(
		(match) => match[1] ?? ''
	);
	return [...importedFiles.map((file) => file.fileName), ...workers];
}

/** The code of a file without its comments, in which a rule's own words may stand. */
function stripComments(source: string): string {
	return source.replace(/\/\*[\s\S]*?\*\//g, '').replace(/(^|\s)\/\/.*$/gm, '$1');
}

function findPackageFault(part: Part, specifier: string): string | null {
	if (part === 'domain') {
		const isAllowed = DOMAIN_LIBRARIES.some((name) => specifier === name || specifier.startsWith(`${name}/`));
		return isAllowed ? null : `domain is pure and may not import ${specifier}`;
	}
	if (specifier === 'sequelize' || specifier === 'sqlite3' || specifier === 'umzug') {
		return part === 'store' ? null : `only lib/server/db and *-store.ts import ${specifier}`;
	}
	const isBrowserPart =
		part === 'components' || part === 'state' || part === 'client' || part === 'browser worker';
	if (isBrowserPart && specifier.startsWith('node:'))
		return `${part} runs in the browser, without ${specifier}`;
	const isProgram = part === 'cli' || part === 'worker';
	if (isProgram && /^(\$app|\$env|@sveltejs\/kit)/.test(specifier))
		return `${part} runs outside Kit, without ${specifier}`;
	return null;
}

/** A page's or layout's client side: what of the edge is sent to the browser. */
function isSentToBrowser(path: string): boolean {
	return path.startsWith('/src/routes/') && !/(\+server|\.server)\.ts$/.test(path);
}

function findImportFault(path: string, part: Part, specifier: string): string | null {
	const target = resolveOwn(path, specifier.replace(/\?.*$/, ''));
	if (target === null) return findPackageFault(part, specifier);
	if (target === '/package.json') return part === 'server' ? null : 'only lib/server reads package.json';
	const targetPart = partOf(target);
	if (targetPart === null) return `no rule knows the folder of ${specifier}`;
	const isServer = targetPart === 'server' || targetPart === 'store';
	if (isServer && isSentToBrowser(path))
		return `a page's own code may not import ${specifier}: it is sent to the browser`;
	// The database as such is a matter of services: the edge asks them.
	if (targetPart === 'store' && part === 'edge')
		return `routes and hooks go through a service, not ${specifier}`;
	if (targetPart === 'store' && part === 'cli') return null;
	return MAY_IMPORT[part].includes(targetPart) ? null : `${part} may not import ${targetPart} (${specifier})`;
}

/** What a file does that its part may not; empty: nothing. */
function findFaults(path: string, source: string): string[] {
	const part = partOf(path);
	if (part === null) return [`${path}: no rule knows this folder`];
	const faults = listImports(path, source).map((specifier) => findImportFault(path, part, specifier));
	const code = stripComments(source);
	if (/process\.env|\$env\//.test(code) && path !== '/src/lib/server/config.ts') {
		faults.push('only lib/server/config.ts reads the environment');
	}
	if (
		part === 'domain' &&
		/\bDate\.now\(|new Date\(\)|Math\.random\(|crypto\.random|performance\.now\(/.test(code)
	) {
		faults.push('domain knows no clock and no randomness: time and ids are arguments');
	}
	return faults.filter((fault) => fault !== null).map((fault) => `${path}: ${fault}`);
}

describe('every import under src', () => {
	it('points the one way', () => {
		expect(Object.keys(sources).length).toBeGreaterThan(100);
		expect(Object.entries(sources).flatMap(([path, source]) => findFaults(path, source))).toEqual([]);
	});
});

describe('the rule itself', () => {
	it.each([
		[
			'a domain file that imports a service',
			'/src/lib/domain/x.ts',
			"import * as people from '$lib/server/people/people-service';"
		],
		[
			'a domain file that climbs out of its folder',
			'/src/lib/domain/symptom/x.ts',
			"import { config } from '../../server/config';"
		],
		['a domain file that uses Node', '/src/lib/domain/x.ts', "import { readFile } from 'node:fs/promises';"],
		['a domain file that uses Kit', '/src/lib/domain/x.ts', "import { error } from '@sveltejs/kit';"],
		[
			"a domain file that imports a page's component",
			'/src/lib/domain/x.ts',
			"import type { X } from '$lib/components/ui/control';"
		],
		[
			'a domain file that loads something late',
			'/src/lib/domain/x.ts',
			"const later = () => import('$lib/server/log');"
		],
		[
			'a domain file that hands something on',
			'/src/lib/domain/x.ts',
			"export { log } from '$lib/server/log';"
		],
		['a domain file that looks at the clock', '/src/lib/domain/x.ts', 'export const now = () => Date.now();'],
		['a domain file that draws lots', '/src/lib/domain/x.ts', 'export const id = () => Math.random();'],
		[
			'a component that imports a service',
			'/src/lib/components/ui/X.svelte',
			'<script lang="ts">import \'$lib/server/log\';</script>'
		],
		['a component that uses Node', '/src/lib/components/ui/x.ts', "import path from 'node:path';"],
		[
			'a page that imports a service',
			'/src/routes/(app)/x/+page.svelte',
			"<script>import { log } from '$lib/server/log';</script>"
		],
		[
			"a page's shared load that imports a service",
			'/src/routes/x/+page.ts',
			"import { log } from '$lib/server/log';"
		],
		[
			'a route that reads the database past the services',
			'/src/routes/x/+server.ts',
			"import { select } from '$lib/server/db/query';"
		],
		[
			'a service that imports Sequelize',
			'/src/lib/server/people/people-service.ts',
			"import { Op } from 'sequelize';"
		],
		[
			'a service that imports a route',
			'/src/lib/server/people/people-service.ts',
			"import { load } from '../../../routes/+page.server';"
		],
		['a command that runs inside Kit', '/src/cli/verbs/x.ts', "import { building } from '$app/environment';"],
		['anybody who reads the environment', '/src/lib/server/log.ts', 'const level = process.env.LOG_LEVEL;'],
		['a folder that nobody agreed on', '/src/lib/utils/x.ts', '']
	])('catches %s', (_title, path, source) => {
		expect(findFaults(path, source)).toHaveLength(1);
	});

	it.each([
		[
			'a route that asks a service',
			'/src/routes/x/+page.server.ts',
			"import * as people from '$lib/server/people/people-service';"
		],
		[
			'a service that asks its store',
			'/src/lib/server/people/people-service.ts',
			"import * as store from './people-store';"
		],
		[
			'a store that imports Sequelize',
			'/src/lib/server/people/people-store.ts',
			"import { Op } from 'sequelize';"
		],
		['the environment in a comment', '/src/lib/server/log.ts', '// process.env is read in config.ts\n'],
		['a schema in the domain', '/src/lib/domain/x.ts', "import { z } from 'zod';"]
	])('lets %s be', (_title, path, source) => {
		expect(findFaults(path, source)).toEqual([]);
	});
});
