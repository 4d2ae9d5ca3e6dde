import { describe, expect, test } from 'vitest';
import type { Sizing } from '$lib/domain/sizing/sizing';
import { withDatabase } from '../../../fixtures/database';
import { makePerson } from '../../../fixtures/factories/person';
import { ORIGIN, request, signInAs } from '../../../fixtures/request';

withDatabase();

/** What the client of the API would send for a hash of 200,000 rows at 4 MB × 2. */
const input = {
	kind: 'hash',
	rows: 200000,
	width: 59,
	memoryKb: 4096,
	hashMemMultiplier: 2,
	engine: 'postgresql',
	engineVersion: '15.18'
};

describe('POST /api/v1/sizing', () => {
	test('refuses a caller who is not signed in', async () => {
		const response = await request('POST', '/api/v1/sizing', { body: input });
		expect(response.status).toBe(401);
	});

	test('refuses input that does not fit and names each field', async () => {
		const response = await request('POST', '/api/v1/sizing', {
			as: 'reader',
			body: { ...input, rows: -5, kind: 'join' }
		});
		expect(response.status).toBe(400);
		expect(response.headers.get('content-type')).toContain('application/problem+json');
		const { errors } = (await response.json()) as { errors: { field: string }[] };
		expect(errors.map(({ field }) => field).sort()).toEqual(['kind', 'rows']);
	});

	test('refuses another media type', async () => {
		const response = await request('POST', '/api/v1/sizing', {
			as: 'reader',
			body: 'kind=hash',
			headers: { 'content-type': 'text/plain' }
		});
		expect(response.status).toBe(415);
	});

	test('answers a reader with the batches that 15.18 made and the settings around', async () => {
		const response = await request('POST', '/api/v1/sizing', { as: 'reader', body: input });
		expect(response.status).toBe(200);
		const sizing = (await response.json()) as Sizing;
		expect(sizing).toMatchObject({ batches: 4, passes: null, setting: { name: 'work_mem' } });
		expect(sizing.table.map(({ batches }) => batches)).toEqual([16, 8, 4, 2, 1]);
	});

	test('replays the first answer to the same Idempotency-Key and refuses another body with it', async () => {
		const person = await makePerson({ role: 'reader' });
		const as = { cookie: await signInAs(person.id) };
		const headers = { 'idempotency-key': 'sizing-once', origin: ORIGIN };
		const first = await request('POST', '/api/v1/sizing', { as, body: input, headers });
		const again = await request('POST', '/api/v1/sizing', { as, body: input, headers });
		expect(await again.json()).toEqual(await first.json());
		const other = await request('POST', '/api/v1/sizing', { as, body: { ...input, rows: 5 }, headers });
		expect(other.status).toBe(422);
	});
});
