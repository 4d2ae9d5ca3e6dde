import { describe, expect, it } from 'vitest';
import { findAccess, listMethods } from '$lib/server/http/route-permissions';
import { withDatabase } from '../../../fixtures/database';
import { request } from '../../../fixtures/request';

withDatabase();

describe('denyByDefault, to a stranger', () => {
	it('asks an API call for a token, whether the call exists or not', async () => {
		for (const path of ['/api/v1/incidents', '/api/v1/nothing-of-the-kind', '/api/v2']) {
			const response = await request('GET', path);
			expect(response.status).toBe(401);
			expect(response.headers.get('content-type')).toBe('application/problem+json');
			expect(response.headers.get('www-authenticate')).toContain('Bearer');
			expect(await response.json()).toMatchObject({ code: 'unauthenticated', status: 401 });
		}
	});

	it('sends a page to sign in and back, whether the page exists or not', async () => {
		for (const path of ['/account', '/incidents/412?tab=log', '/no/such/page']) {
			const response = await request('GET', path);
			expect(response.status).toBe(303);
			expect(response.headers.get('location')).toBe(`/sign-in?next=${encodeURIComponent(path)}`);
			expect(await response.text()).toBe('');
		}
	});

	it('does not take a page for open because its address looks like an open one', async () => {
		const response = await request('GET', '/sign-in/../account');
		expect(response.status).toBe(303);
	});
});

describe('denyByDefault, to a signed-in person', () => {
	it('answers an unknown call with 404 as problem+json', async () => {
		const response = await request('GET', '/api/v1/nothing-of-the-kind', { as: 'reader' });
		expect(response.status).toBe(404);
		expect(await response.json()).toMatchObject({ code: 'not_found', status: 404 });
	});

	it('answers a method that is not in the table with 405 and those that are', async () => {
		const response = await request('DELETE', '/api/v1/health', { as: 'administrator' });
		expect(response.status).toBe(405);
		expect(response.headers.get('allow')).toBe('HEAD, GET');
		expect(await response.json()).toMatchObject({ code: 'method_not_allowed', status: 405 });
	});
});

describe('findAccess', () => {
	it('knows no route and no method that is not in the table', () => {
		expect(findAccess('/nowhere', 'GET', null)).toBeNull();
		expect(findAccess('/sign-out', 'GET', null)).toBeNull();
		expect(findAccess('/(app)/runbooks/[slug]', 'POST', 'constructor')).toBeNull();
		expect(listMethods('/sign-out')).toEqual(['POST']);
		expect(listMethods('/(app)/runbooks/[slug]')).toEqual(['HEAD', 'GET', 'POST']);
	});
});
