import { describe, expect, it } from 'vitest';
import { readAnswer } from '../../../fixtures/api';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';
import { request, signInAs } from '../../../fixtures/request';

withDatabase();

async function signIn() {
	const cookie = await signInAs((await makePerson({ role: 'responder' })).id);
	return (method: string, path: string, body?: unknown, headers: Record<string, string> = {}) =>
		request(method, path, { as: { cookie }, body, headers });
}

describe('/api/v1/incidents/{number}/entries', () => {
	it('refuses an empty text, and a colleague who would correct it', async () => {
		const path = `/api/v1/incidents/${await makeIncident()}/entries`;
		const call = await signIn();
		expect((await call('POST', path, { text: ' ' })).status).toBe(400);
		const made = await call('POST', path, { text: 'Batch stopped.' });
		const other = await signIn();
		const headers = { 'if-match': '"1"' };
		expect((await other('PATCH', made.headers.get('location') ?? '', { text: 'X' }, headers)).status).toBe(
			403
		);
	});

	it('adds, lists, reads and corrects as the document says', async () => {
		const path = `/api/v1/incidents/${await makeIncident()}/entries`;
		const call = await signIn();
		const made = await call('POST', path, { text: 'Batch stopped.', at: '2026-03-02T02:20:00Z' });
		const location = made.headers.get('location') ?? '';
		await readAnswer(made, 'POST', '/incidents/{number}/entries');
		const changed = await call('PATCH', location, { text: 'Batch held.' }, { 'if-match': '"1"' });
		expect(changed.headers.get('etag')).toBe('"2"');
		await readAnswer(changed, 'PATCH', '/incidents/{number}/entries/{id}');
		const read = await call('GET', location);
		expect(await readAnswer(read, 'GET', '/incidents/{number}/entries/{id}')).toMatchObject({
			text: 'Batch held.',
			at: '2026-03-02T02:20:00.000Z'
		});
		const listed = await readAnswer(await call('GET', path), 'GET', '/incidents/{number}/entries');
		expect(listed).toMatchObject({ total: 1, next: null, items: [{ revision: 2 }] });
	});
});

describe('/api/v1/incidents/{number}/attempts', () => {
	it('refuses an attempt of nothing, an outcome that is none, and an edit without If-Match', async () => {
		const path = `/api/v1/incidents/${await makeIncident()}/attempts`;
		const call = await signIn();
		expect((await call('POST', path, {})).status).toBe(400);
		const made = await call('POST', path, { title: 'Analyze port_call' });
		const location = made.headers.get('location') ?? '';
		expect((await call('PATCH', location, { outcome: 'worked' })).status).toBe(428);
		expect((await call('PATCH', location, { outcome: 'great' }, { 'if-match': '"1"' })).status).toBe(400);
	});

	it('starts, lists, reads and ends as the document says', async () => {
		const path = `/api/v1/incidents/${await makeIncident()}/attempts`;
		const call = await signIn();
		const made = await call('POST', path, { title: 'Analyze port_call' });
		const location = made.headers.get('location') ?? '';
		await readAnswer(made, 'POST', '/incidents/{number}/attempts');
		const ended = await call('PATCH', location, { outcome: 'worked' }, { 'if-match': '"1"' });
		await readAnswer(ended, 'PATCH', '/incidents/{number}/attempts/{id}');
		const read = await readAnswer(await call('GET', location), 'GET', '/incidents/{number}/attempts/{id}');
		expect(read).toMatchObject({ outcome: 'worked', revision: 2 });
		const listed = await readAnswer(await call('GET', path), 'GET', '/incidents/{number}/attempts');
		expect(listed).toMatchObject({ total: 1, items: [{ title: 'Analyze port_call' }] });
	});
});
