/**
 * Every route that has files under src/routes, with every method and form action that they export, asked by
 * every kind of caller: what route-permissions.ts says happens, and nothing else. Nothing here names a route:
 * a new one is asked as soon as its files exist.
 */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { couldEver } from '$lib/domain/person/can';
import { PERMISSIONS, type Permission } from '$lib/domain/person/permissions';
import { ROLES, type Actor, type Role } from '$lib/domain/person/person';
import type { Database } from '$lib/server/db/connection';
import { SessionModel } from '$lib/server/db/models/session';
import { write } from '$lib/server/db/transaction';
import { hashSecret } from '$lib/server/secrets';
import { findAccess, ROUTE_PERMISSIONS, type Access } from '$lib/server/http/route-permissions';
import * as tokens from '$lib/server/sessions/tokens-service';
import { dropDatabase, makeDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { ORIGIN, request, signInAs } from '../../../fixtures/request';
import { listRoutes, matchRoute, type Route } from '../../../fixtures/routes';

const METHODS = ['GET', 'POST', 'PATCH', 'PUT', 'DELETE'] as const;

/** One thing that can be asked of a route. */
interface Call {
	routeId: string;
	method: (typeof METHODS)[number];
	/** Name of the form action; null: no form. */
	action: string | null;
}

/** What parameters stand for; nothing of these exists, so that an allowed call finds nothing to change. */
const PARAMS: Record<string, string> = {
	sha256: 'ab'.repeat(32),
	slug: 'no-such-runbook',
	token: 'no-such-link'
};

async function listCalls(route: Route): Promise<Call[]> {
	const calls: Call[] = [];
	const endpoint = await route.endpoint?.();
	for (const method of METHODS) {
		if (endpoint && method in endpoint) calls.push({ routeId: route.id, method, action: null });
	}
	if (route.hasPage || route.page) calls.push({ routeId: route.id, method: 'GET', action: null });
	const page = await route.page?.();
	for (const action of Object.keys(page?.actions ?? {})) {
		calls.push({ routeId: route.id, method: 'POST', action });
	}
	return calls;
}

const calls = (await Promise.all(listRoutes().map(listCalls))).flat();

function pathOf({ routeId, action }: Call): string {
	const parts = routeId
		.split('/')
		.filter((part) => part !== '' && !/^\(.*\)$/.test(part))
		.map((part) =>
			part.replace(/^\[(?:\.\.\.)?(\w+)(?:=\w+)?\]$/, (_all, name: string) => PARAMS[name] ?? '999999')
		);
	return `/${parts.join('/')}${action !== null && action !== 'default' ? `?/${action}` : ''}`;
}

/** Who asks, and as whom the application should see them. */
interface Caller {
	name: string;
	headers: () => Promise<Record<string, string>>;
	/** null: a stranger. */
	role: Role | null;
	/** Tokens open API routes alone. */
	isProgram?: boolean;
}

async function cookieHeaders(role: Role): Promise<Record<string, string>> {
	const person = await makePerson({ role });
	return { cookie: `catchwater_session=${await signInAs(person.id)}`, origin: ORIGIN };
}

async function expiredHeaders(): Promise<Record<string, string>> {
	const person = await makePerson({ role: 'administrator' });
	const value = await signInAs(person.id);
	await write(() =>
		SessionModel.update({ expiresAt: '2026-01-01T00:00:00.000Z' }, { where: { idHash: hashSecret(value) } })
	);
	return { cookie: `catchwater_session=${value}`, origin: ORIGIN };
}

async function tokenHeaders(role: Role): Promise<Record<string, string>> {
	const owner = await makePerson({ role: 'administrator' });
	const made = await tokens.create(owner.actor, { personId: owner.id, name: 'matrix', role, days: 1 });
	return { authorization: `Bearer ${made.ok ? made.value.token : ''}` };
}

const CALLERS: Caller[] = [
	{ name: 'signed out', headers: () => Promise.resolve({ origin: ORIGIN }), role: null },
	{ name: 'an expired session of an administrator', headers: expiredHeaders, role: null },
	{ name: 'an unknown token', headers: () => Promise.resolve({ authorization: 'Bearer cw_x' }), role: null },
	...ROLES.map((role) => ({ name: role, headers: () => cookieHeaders(role), role })),
	...ROLES.slice(0, -1).map((role) => ({
		name: `a ${role} token of an administrator`,
		headers: () => tokenHeaders(role),
		role,
		isProgram: true
	}))
];

type Expected = 'asked to sign in' | 'forbidden' | 'allowed' | 'allowed, or forbidden by the thing itself';

function expectOf(call: Call, access: Access, caller: Caller): Expected {
	if (access === 'open') return 'allowed';
	const isApi = call.routeId.startsWith('/api/');
	if (caller.role === null || (caller.isProgram && !isApi)) return 'asked to sign in';
	const actor: Actor = { personId: 1, name: '', role: caller.role, via: 'session', tokenId: null };
	if (!couldEver(actor, access)) return 'forbidden';
	const isOwnersOnly =
		'own' in PERMISSIONS[access] && ROLES.indexOf(caller.role) < ROLES.indexOf(PERMISSIONS[access].from);
	// Its one purpose is to say that another page is closed.
	if (call.routeId === '/(app)/refused') return 'forbidden';
	return isOwnersOnly ? 'allowed, or forbidden by the thing itself' : 'allowed';
}

/** What an answer amounts to; a page's sign-in redirect counts like the API's 401. */
function describeAnswer(response: Response): Expected | string {
	const leadsToSignIn = response.headers.get('location')?.startsWith('/sign-in') ?? false;
	if (response.status === 401 || (response.status === 303 && leadsToSignIn)) return 'asked to sign in';
	if (response.status === 403) return 'forbidden';
	return response.status >= 500 ? `status ${response.status}` : 'allowed';
}

let requests = 0;

async function ask(call: Call, caller: Caller): Promise<string> {
	requests += 1;
	const headers = await caller.headers();
	const isWriting = call.method !== 'GET';
	if (call.action !== null) headers['content-type'] = 'application/x-www-form-urlencoded';
	return describeAnswer(
		await request(call.method, pathOf(call), {
			headers,
			body: isWriting && call.method !== 'DELETE' ? (call.action === null ? {} : '') : undefined,
			// Limits on guesses count by address: each asks from its own.
			address: `10.${requests >> 16}.${(requests >> 8) & 255}.${requests & 255}`
		})
	);
}

function isAsExpected(answer: string, expected: Expected, call: Call): boolean {
	// Signing out leads to the sign-in page by itself; so does a wrong password answer 401 of its own.
	if (expected === 'allowed' && call.routeId === '/sign-out') return answer !== 'forbidden';
	if (expected === 'allowed, or forbidden by the thing itself')
		return ['allowed', 'forbidden'].includes(answer);
	return answer === expected;
}

let db: Database;
beforeAll(async () => {
	db = await makeDatabase();
});
afterAll(() => dropDatabase(db));

describe('route-permissions', () => {
	it.each(
		calls.map((call) => [`${call.method} ${call.routeId}${call.action ? `?/${call.action}` : ''}`, call])
	)('has a row for %s', (_title, call) => {
		const { routeId, method, action } = call;
		const access = findAccess(routeId, method, action);
		expect(
			access,
			`Nobody may call ${method} ${routeId} yet: add ${method} to the row '${routeId}' of ` +
				'ROUTE_PERMISSIONS in src/lib/server/http/route-permissions.ts.'
		).not.toBeNull();
	});

	it('has no row and no method without a route', () => {
		const exported = new Set(calls.map(({ routeId, method }) => `${method} ${routeId}`));
		const actions = new Set(calls.map(({ routeId, action }) => `${action} ${routeId}`));
		const listed = Object.entries(ROUTE_PERMISSIONS).flatMap(([routeId, row]) => {
			const { actions: named, ...methods } = row;
			return [
				...Object.keys(methods)
					.map((method) => `${method} ${routeId}`)
					.filter((name) => !exported.has(name)),
				...Object.keys(named ?? {})
					.map((name) => `${name} ${routeId}`)
					.filter((name) => !actions.has(name))
			];
		});
		expect(listed, 'Rows of ROUTE_PERMISSIONS that lead to nothing: take them out.').toEqual([]);
	});

	it('names only permissions that exist', () => {
		const named = Object.values(ROUTE_PERMISSIONS).flatMap(({ actions, ...methods }) => [
			...Object.values(methods),
			...Object.values(actions ?? {})
		]);
		expect(
			named.filter((access) => access !== 'open' && !((access satisfies Permission) in PERMISSIONS))
		).toEqual([]);
	});
});

describe('every call', () => {
	it.each(
		calls.map((call) => [`${call.method} ${call.routeId}${call.action ? `?/${call.action}` : ''}`, call])
	)('%s answers each caller as the table says', async (_title, call) => {
		expect(matchRoute(new URL(pathOf(call), ORIGIN).pathname)?.route.id).toBe(call.routeId);
		const access = findAccess(call.routeId, call.method, call.action);
		const wrong: string[] = [];
		for (const caller of CALLERS) {
			const expected = access === null ? 'forbidden' : expectOf(call, access, caller);
			const answer = await ask(call, caller);
			if (!isAsExpected(answer, expected, call)) wrong.push(`${caller.name}: ${answer}, not ${expected}`);
		}
		expect(wrong).toEqual([]);
	});
});
