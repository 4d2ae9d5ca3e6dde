import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { overrideConfig } from '$lib/server/config';
import { select } from '$lib/server/db/query';
import { callOf, readAnswer } from '../../../fixtures/api';
import { readSide } from '../../../fixtures/compare';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { request } from '../../../fixtures/request';
import { listDataFiles, readUploadFixture } from '../../../fixtures/spool';

withDatabase();

interface Items {
	items: { id: number; sha256: string; name: string }[];
}
interface Readings {
	readings: { format: string; warnings: { message: string }[]; causes: { runbooks: string[] }[] }[];
}

function formOf(...files: [string, string | Uint8Array][]): FormData {
	const data = new FormData();
	for (const [name, content] of files)
		data.append(
			'evidence',
			new Blob([typeof content === 'string' ? content : new Uint8Array(content)]),
			name
		);
	return data;
}

async function planForm(name = 'plan.json'): Promise<FormData> {
	return formOf([name, await readUploadFixture('plan.json')]);
}

describe('POST /api/v1/readings', () => {
	it('refuses a stranger, a media type that is no evidence, and a form without files', async () => {
		expect((await request('POST', '/api/v1/readings', { body: 'x' })).status).toBe(401);
		const html = await request('POST', '/api/v1/readings', {
			as: 'reader',
			body: '<p>',
			headers: { 'content-type': 'text/html' }
		});
		expect(html.status).toBe(415);
		const empty = await request('POST', '/api/v1/readings', { as: 'reader', body: formOf() });
		expect(empty.status).toBe(400);
	});

	it('refuses what announces more than MAX_UPLOAD_MB', async () => {
		overrideConfig({ maxUploadMb: 1 });
		const response = await request('POST', '/api/v1/readings', {
			as: 'reader',
			body: 'LOG:  x',
			headers: { 'content-type': 'text/plain', 'content-length': '1048577' }
		});
		overrideConfig({ maxUploadMb: 4096 });
		expect(response.status).toBe(413);
	});

	it.each(['text/plain', 'application/json', 'application/xml', 'application/octet-stream'])(
		'reads a raw body of %s by its content and stores nothing',
		async (type) => {
			const response = await request('POST', '/api/v1/readings', {
				as: 'reader',
				body: new Uint8Array(await readUploadFixture('plan.json')),
				headers: { 'content-type': type }
			});
			const { readings } = await readAnswer<Readings>(response, 'POST', '/readings');
			expect(readings.map(({ format }) => format)).toEqual(['postgres-json']);
			expect(await select('SELECT id FROM evidence')).toEqual([]);
			expect(await listDataFiles('spool')).toEqual([]);
			expect(await listDataFiles('evidence')).toEqual([]);
		}
	);

	it.each([
		['an empty body', ''],
		['text that is none of the formats', 'Dear colleagues, the report is slow again.'],
		['JSON that is no plan', '{"hello": [1, 2, 3]}']
	])('answers %s with format unknown and a warning', async (_what, body) => {
		const headers = { 'content-type': 'text/plain' };
		const response = await request('POST', '/api/v1/readings', { as: 'reader', body, headers });
		const { readings } = await readAnswer<Readings>(response, 'POST', '/readings');
		expect(readings.map(({ format }) => format)).toEqual(['unknown']);
		expect(readings[0]?.warnings[0]?.message).toMatch(/\w/);
	});

	it('takes a request without any body for an empty file', async () => {
		const response = await request('POST', '/api/v1/readings', { as: 'reader' });
		const { readings } = await readAnswer<Readings>(response, 'POST', '/readings');
		expect(readings).toMatchObject([{ format: 'unknown', bytes: 0 }]);
	});

	it('reads several files of one request, in their order', async () => {
		const body = formOf(
			['server.log', await readUploadFixture('server.log')],
			['plan.json', await readUploadFixture('plan.json')]
		);
		const response = await request('POST', '/api/v1/readings', { as: 'reader', body });
		const { readings } = await readAnswer<Readings>(response, 'POST', '/readings');
		expect(readings.map(({ format }) => format)[0]).toBe('postgres-log');
		expect(readings.at(-1)).toMatchObject({ name: 'plan.json', format: 'postgres-json' });
	});
});

describe('POST /api/v1/readings/compare', () => {
	const PATH = '/api/v1/readings/compare';
	const PAIR = 'statistics-taken-swap-the-build-side';
	const pairForm = (...parts: [string, Uint8Array | string][]): FormData => {
		const data = new FormData();
		for (const [field, content] of parts)
			data.append(
				field,
				new Blob([typeof content === 'string' ? content : new Uint8Array(content)]),
				`${field}.json`
			);
		return data;
	};
	const before = readSide(PAIR, 'before');
	const after = readSide(PAIR, 'after');

	it('refuses a stranger and a body that is no form', async () => {
		expect((await request('POST', PATH, { body: pairForm() })).status).toBe(401);
		expect((await request('POST', PATH, { as: 'reader', body: { before: 1 } })).status).toBe(415);
	});

	it.each([
		['after', pairForm(['before', before])],
		['before', pairForm(['after', after])],
		['before', pairForm(['before', before], ['before', before], ['after', after])]
	])('names the field %s where there is not one file', async (field, body) => {
		const response = await request('POST', PATH, { as: 'reader', body });
		expect(response.status).toBe(400);
		expect(await response.json()).toMatchObject({ code: 'invalid', errors: [{ field }] });
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('names a field that it does not know', async () => {
		const body = pairForm(['before', before], ['after', after], ['later', after]);
		const response = await request('POST', PATH, { as: 'reader', body });
		expect(await response.json()).toMatchObject({ code: 'invalid', errors: [{ field: 'later' }] });
	});

	it('answers what changed and stores nothing', async () => {
		const body = pairForm(['before', before], ['after', after]);
		const response = await request('POST', PATH, { as: 'reader', body });
		const comparison = await readAnswer(response, 'POST', '/readings/compare');
		expect(comparison).toMatchObject({
			summary: expect.stringMatching(/^Time fell from 666 to 388 ms/),
			timeMs: [666.345, 387.686],
			symptomsGone: ['row-underestimate', 'sort-spill']
		});
		expect(await select('SELECT id FROM evidence')).toEqual([]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('answers in words where there is nothing to compare', async () => {
		const body = pairForm(['before', before], ['after', 'no plan']);
		const response = await request('POST', PATH, { as: 'reader', body });
		expect(await readAnswer(response, 'POST', '/readings/compare')).toMatchObject({
			summary: expect.stringMatching(/^Before is a plan, after neither/),
			operators: []
		});
	});
});

describe('POST /api/v1/incidents/{number}/evidence', () => {
	it('refuses a reader, an incident that is none, and a body that breaks off', async () => {
		const number = await makeIncident();
		const path = `/api/v1/incidents/${number}/evidence`;
		expect((await request('POST', path, { as: 'reader', body: await planForm() })).status).toBe(403);
		const missing = '/api/v1/incidents/99/evidence';
		expect((await request('POST', missing, { as: 'responder', body: await planForm() })).status).toBe(404);
		const cut = await request('POST', path, {
			as: 'responder',
			body: '--b\r\nContent-Disposition: form-data; name="evidence"; filename="plan.json"\r\n\r\n[{"Pl',
			headers: { 'content-type': 'multipart/form-data; boundary=b' }
		});
		expect(cut.status).toBe(400);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('answers the evidence with its readings and where the file is', async () => {
		const path = `/api/v1/incidents/${await makeIncident()}/evidence`;
		const response = await request('POST', path, { as: 'responder', body: await planForm() });
		const { items } = await readAnswer<Items>(response, 'POST', '/incidents/{number}/evidence');
		expect(response.headers.get('location')).toBe(`/api/v1/evidence/${items[0]?.sha256}`);
	});
});

describe('POST /api/v1/evidence', () => {
	it('refuses a number that is none, and keeps nothing', async () => {
		const body = await planForm();
		body.append('incident', 'seven');
		const response = await request('POST', '/api/v1/evidence', { as: 'responder', body });
		expect(response.status).toBe(400);
		expect((await response.json()).errors).toMatchObject([{ field: 'incident' }]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('keeps it alone, or for the incident that is named', async () => {
		const number = await makeIncident();
		const alone = await request('POST', '/api/v1/evidence', { as: 'responder', body: await planForm() });
		await readAnswer<Items>(alone, 'POST', '/evidence');
		expect(await select('SELECT incidentNumber FROM evidence')).toEqual([{ incidentNumber: null }]);
		const body = await planForm();
		body.append('incident', String(number));
		await readAnswer(
			await request('POST', '/api/v1/evidence', { as: 'responder', body }),
			'POST',
			'/evidence'
		);
		expect(await select('SELECT incidentNumber FROM evidence')).toEqual([{ incidentNumber: number }]);
	});
});

describe('GET /api/v1/evidence/{sha256}', () => {
	it('answers 401 to a stranger and 404 for a hash that nobody holds', async () => {
		const path = `/api/v1/evidence/${'0'.repeat(64)}`;
		expect((await request('GET', path)).status).toBe(401);
		expect((await request('GET', path, { as: 'reader' })).status).toBe(404);
		expect((await request('GET', '/api/v1/evidence/%00', { as: 'reader' })).status).toBe(404);
	});

	it('sends the masked bytes as a download that nothing renders', async () => {
		const name = 'plän "x".json';
		const kept = await request('POST', '/api/v1/evidence', { as: 'responder', body: await planForm(name) });
		const sha256 = ((await kept.json()) as Items).items[0]?.sha256 ?? '';
		const response = await request('GET', `/api/v1/evidence/${sha256}`, { as: 'reader' });
		expect(callOf('GET', '/evidence/{sha256}').answer).toMatchObject({ status: response.status, file: true });
		expect(Object.fromEntries(response.headers)).toMatchObject({
			'content-type': 'application/octet-stream',
			'content-disposition': `attachment; filename="pl_n _x_.json"; filename*=UTF-8''pl%C3%A4n%20%22x%22.json`,
			'content-security-policy': "default-src 'none'; sandbox",
			'x-content-type-options': 'nosniff'
		});
		const bytes = Buffer.from(await response.arrayBuffer());
		expect(createHash('sha256').update(bytes).digest('hex')).toBe(sha256);
		expect(response.headers.get('content-length')).toBe(String(bytes.byteLength));
	});
});

describe('DELETE /api/v1/incidents/{number}/evidence/{id}', () => {
	it('refuses a responder, answers 204 to a curator and 404 the second time', async () => {
		const number = await makeIncident();
		const path = `/api/v1/incidents/${number}/evidence`;
		const kept = await request('POST', path, { as: 'responder', body: await planForm() });
		const id = ((await kept.json()) as Items).items[0]?.id;
		expect((await request('DELETE', `${path}/${id}`, { as: 'responder' })).status).toBe(403);
		const removed = await request('DELETE', `${path}/${id}`, { as: 'curator' });
		expect([removed.status, await removed.text()]).toEqual([204, '']);
		expect((await request('DELETE', `${path}/${id}`, { as: 'curator' })).status).toBe(404);
	});
});
