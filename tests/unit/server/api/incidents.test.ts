import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import { overrideConfig } from '$lib/server/config';
import { readAnswer } from '../../../fixtures/api';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';
import { request, signInAs } from '../../../fixtures/request';
import { listDataFiles, readUploadFixture } from '../../../fixtures/spool';

withDatabase();

interface Answered {
	number: number;
	revision: number;
	title: string;
	evidence: { id: number; sha256: string; readings: unknown[] }[];
}

async function formOf(incident: unknown, ...files: string[]): Promise<FormData> {
	const data = new FormData();
	if (incident !== undefined) data.append('incident', JSON.stringify(incident));
	for (const file of files)
		data.append('evidence', new Blob([new Uint8Array(await readUploadFixture(file))]), file);
	return data;
}

/** Somebody signed in, whose requests come one after the other. */
async function signIn(role: 'reader' | 'responder' | 'curator') {
	const { id } = await makePerson({ role });
	const cookie = await signInAs(id);
	return (method: string, path: string, options: { body?: unknown; headers?: Record<string, string> } = {}) =>
		request(method, path, { as: { cookie }, ...options });
}

async function problemOf(response: Response) {
	expect(response.headers.get('content-type')).toBe('application/problem+json');
	return (await response.json()) as {
		status: number;
		code: string;
		errors?: { field: string }[];
		reasons?: string[];
		current?: Answered;
	};
}

describe('POST /api/v1/incidents', () => {
	it('refuses a stranger, an ended session and a reader without reading the body', async () => {
		const body = { title: 'Slow' };
		expect((await request('POST', '/api/v1/incidents', { body })).status).toBe(401);
		const stranger = await request('POST', '/api/v1/incidents', { body, as: { cookie: 'x'.repeat(64) } });
		expect(stranger.status).toBe(401);
		expect((await request('POST', '/api/v1/incidents', { body, as: 'reader' })).status).toBe(403);
		expect(await select('SELECT number FROM incidents')).toEqual([]);
	});

	it.each([
		['no title', {}, ['title']],
		['a title of blanks', { title: '  ' }, ['title']],
		['a severity that is none', { title: 'Slow', severity: 5 }, ['severity']],
		['a time without an offset', { title: 'Slow', startedAt: '2026-03-02T02:00:00' }, ['startedAt']],
		['a list', ['title'], ['']]
	])('refuses %s and names the field', async (_what, body, fields) => {
		const problem = await problemOf(await request('POST', '/api/v1/incidents', { as: 'responder', body }));
		expect(problem).toMatchObject({ status: 400, code: 'invalid' });
		expect(problem.errors?.map(({ field }) => field)).toEqual(fields);
	});

	it('refuses JSON that is none, another media type, and a part that is missing', async () => {
		const as = 'responder';
		const headers = { 'content-type': 'application/json' };
		const cut = await request('POST', '/api/v1/incidents', { as, body: '{"title": "Sl', headers });
		expect((await problemOf(cut)).code).toBe('invalid');
		const plain = await request('POST', '/api/v1/incidents', {
			as,
			body: 'Slow',
			headers: { 'content-type': 'text/plain' }
		});
		expect((await problemOf(plain)).status).toBe(415);
		const partless = await request('POST', '/api/v1/incidents', {
			as,
			body: await formOf(undefined, 'plan.json')
		});
		expect((await problemOf(partless)).errors).toMatchObject([{ field: 'incident' }]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('refuses more than MAX_UPLOAD_MB and keeps nothing', async () => {
		overrideConfig({ maxUploadMb: 1 });
		const data = new FormData();
		data.append('incident', '{"title":"Slow"}');
		data.append('evidence', new Blob([new Uint8Array(1_200_000)]), 'server.log');
		const problem = await problemOf(
			await request('POST', '/api/v1/incidents', { as: 'responder', body: data })
		);
		overrideConfig({ maxUploadMb: 4096 });
		expect(problem).toMatchObject({ status: 413, code: 'too_large' });
		expect(await select('SELECT number FROM incidents')).toEqual([]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('logs it from JSON, answers where it is, and ignores fields that it does not know', async () => {
		const body = { title: '<b>Slow</b>', startedAt: '2026-03-02T03:00:00+01:00', mood: 'bad', number: 99 };
		const response = await request('POST', '/api/v1/incidents', { as: 'responder', body });
		expect(response.headers.get('location')).toBe('/api/v1/incidents/1');
		expect(response.headers.get('etag')).toBe('"1"');
		expect(await readAnswer(response, 'POST', '/incidents')).toMatchObject({
			number: 1,
			title: '<b>Slow</b>',
			startedAt: '2026-03-02T02:00:00.000Z',
			origin: 'person'
		});
	});

	it('logs it with its evidence, readings in the answer', async () => {
		const body = await formOf({ title: 'Slow' }, 'plan.json', 'server.log');
		const response = await request('POST', '/api/v1/incidents', { as: 'responder', body });
		const incident = await readAnswer<Answered>(response, 'POST', '/incidents');
		expect(incident.evidence.map(({ readings }) => readings.length > 0)).toEqual([true, true]);
	});

	it('takes the incident as a file of JSON, as programs send it', async () => {
		const data = new FormData();
		data.append('incident', new Blob(['{"title":"Slow"}'], { type: 'application/json' }));
		const response = await request('POST', '/api/v1/incidents', { as: 'responder', body: data });
		expect(await readAnswer(response, 'POST', '/incidents')).toMatchObject({ title: 'Slow' });
	});

	it('logs it once for one Idempotency-Key, and refuses the key with another body', async () => {
		const call = await signIn('responder');
		const headers = { 'idempotency-key': 'night-1' };
		const post = async (title: string) =>
			call('POST', '/api/v1/incidents', { body: await formOf({ title }, 'plan.json'), headers });
		const first = await post('Slow');
		const again = await post('Slow');
		expect([again.status, again.headers.get('location')]).toEqual([201, first.headers.get('location')]);
		expect(await again.text()).toBe(await first.text());
		expect((await post('Slower')).status).toBe(422);
		expect(await select('SELECT number FROM incidents')).toHaveLength(1);
	});
});

describe('GET /api/v1/incidents', () => {
	it('refuses a filter that does not fit, each under its name', async () => {
		const path = '/api/v1/incidents?state=shut&severity=9&limit=1000&cursor=x&from=soon';
		const problem = await problemOf(await request('GET', path, { as: 'reader' }));
		expect(problem.errors?.map(({ field }) => field)).toEqual(['limit', 'state[0]', 'severity[0]', 'from']);
	});

	it('answers a page that names the next one', async () => {
		for (let i = 0; i < 3; i++) await makeIncident({ title: `Slow ${i}`, state: 'open' });
		const call = await signIn('reader');
		const first = await call('GET', '/api/v1/incidents?limit=2&sort=number&state=open&state=contained');
		const link = /^<([^>]+)>; rel="next"$/.exec(first.headers.get('link') ?? '')?.[1] ?? '';
		const page = await readAnswer<{ items: Answered[]; next: string; total: number }>(
			first,
			'GET',
			'/incidents'
		);
		expect(page.items.map(({ number }) => number)).toEqual([1, 2]);
		expect(page.total).toBe(3);
		const last = await call('GET', link);
		expect(last.headers.get('link')).toBeNull();
		expect(await readAnswer(last, 'GET', '/incidents')).toMatchObject({ items: [{ number: 3 }], next: null });
	});
});

describe('GET /api/v1/incidents/{number}', () => {
	it.each(['99', '0', '-1', '1.5', 'abc', '9'.repeat(30), '%00', "1'--"])(
		'answers 404 for %s',
		async (number) => {
			await makeIncident();
			const problem = await problemOf(await request('GET', `/api/v1/incidents/${number}`, { as: 'reader' }));
			expect(problem).toMatchObject({ status: 404, code: 'not_found' });
		}
	);

	it('answers the incident with its revision as ETag', async () => {
		const number = await makeIncident({ revision: 4 });
		const response = await request('GET', `/api/v1/incidents/${number}`, { as: 'reader' });
		expect(response.headers.get('etag')).toBe('"4"');
		expect(await readAnswer(response, 'GET', '/incidents/{number}')).toMatchObject({ number });
	});
});

describe('PATCH /api/v1/incidents/{number}', () => {
	it('asks for If-Match', async () => {
		const number = await makeIncident();
		const path = `/api/v1/incidents/${number}`;
		const problem = await problemOf(await request('PATCH', path, { as: 'responder', body: { title: 'X' } }));
		expect(problem).toMatchObject({ status: 428, code: 'precondition_required' });
	});

	it.each(['"7"', 'W/"1"', '1', '"x"'])('answers 412 with what stands there for %s', async (tag) => {
		const number = await makeIncident({ title: 'As it was' });
		const response = await request('PATCH', `/api/v1/incidents/${number}`, {
			as: 'responder',
			body: { title: 'Overwritten' },
			headers: { 'if-match': tag }
		});
		const problem = await problemOf(response);
		expect(problem).toMatchObject({
			status: 412,
			code: 'stale',
			current: { title: 'As it was', revision: 1 }
		});
	});

	it('answers 409 with every reason for a move that the state does not allow', async () => {
		const number = await makeIncident();
		const response = await request('PATCH', `/api/v1/incidents/${number}`, {
			as: 'curator',
			body: { state: 'reviewed' },
			headers: { 'if-match': '"1"' }
		});
		const problem = await problemOf(response);
		expect(problem).toMatchObject({ status: 409, code: 'refused' });
		expect(problem.reasons).toHaveLength(3);
	});

	it('merges, and answers the next revision', async () => {
		const number = await makeIncident({ service: 'invoicing', cause: 'missing-index' });
		const response = await request('PATCH', `/api/v1/incidents/${number}`, {
			as: 'responder',
			body: { cause: null, severity: 1 },
			headers: { 'if-match': '"1"', 'content-type': 'application/merge-patch+json' }
		});
		expect(response.headers.get('etag')).toBe('"2"');
		expect(await readAnswer(response, 'PATCH', '/incidents/{number}')).toMatchObject({
			service: 'invoicing',
			cause: null,
			severity: 1
		});
	});
});
