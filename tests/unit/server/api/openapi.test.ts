import { Validator } from '@seriousme/openapi-schema-validator';
import { describe, expect, it } from 'vitest';
import { CALLS } from '$lib/server/api/calls/calls';
import { describeApi } from '$lib/server/api/openapi';
import { ROUTE_PERMISSIONS } from '$lib/server/http/route-permissions';
import { listRoutes } from '../../../fixtures/routes';

const METHODS = ['GET', 'POST', 'PATCH', 'PUT', 'DELETE'] as const;

/** `get /incidents/{number}` for each method that a route module under /api/v1 exports. */
async function listServed(): Promise<string[]> {
	const routes = listRoutes().filter(({ id, endpoint }) => id.startsWith('/api/v1/') && endpoint);
	const served = await Promise.all(
		routes.map(async ({ id, endpoint }) => {
			const module = (await endpoint?.()) ?? {};
			return METHODS.filter((method) => module[method]).map((method) => toLine(method, id));
		})
	);
	return served.flat().sort();
}

function toLine(method: string, routeId: string): string {
	const path = routeId.replace('/api/v1', '').replaceAll(/\[(\w+)(?:=\w+)?\]/g, '{$1}');
	return `${method.toLowerCase()} ${path}`;
}

describe('describeApi', () => {
	it('is a document of OpenAPI 3.1 that a validator accepts', async () => {
		const result = await new Validator().validate(structuredClone(describeApi()));
		expect(result.errors ?? []).toEqual([]);
		expect(result.valid).toBe(true);
	});

	it('lists every call that a route serves, and none that there is not', async () => {
		expect(CALLS.map(({ method, path }) => `${method} ${path}`).sort()).toEqual(await listServed());
	});

	it('names each call once', () => {
		const ids = CALLS.map((call) => call.id);
		expect(new Set(ids).size).toBe(ids.length);
	});

	it('asks for no sign-in exactly where the permissions say open', () => {
		const open = Object.entries(ROUTE_PERMISSIONS)
			.filter(([id]) => id.startsWith('/api/v1/'))
			.flatMap(([id, row]) =>
				METHODS.filter((method) => row[method] === 'open').map((method) => toLine(method, id))
			);
		const told = CALLS.filter((call) => call.isOpen).map(({ method, path }) => `${method} ${path}`);
		expect(told.sort()).toEqual(open.sort());
	});

	it('refers to nothing that it does not hold', () => {
		const text = JSON.stringify(describeApi());
		const { schemas } = describeApi().components as { schemas: Record<string, unknown> };
		const names = [...text.matchAll(/"\$ref":"#\/components\/schemas\/([^"]+)"/g)].map(
			(match) => match[1] ?? ''
		);
		expect(names.length).toBeGreaterThan(20);
		expect(names.filter((name) => !(name in schemas))).toEqual([]);
	});
});
