import { readFile } from 'node:fs/promises';
import { beforeEach, describe, expect, it } from 'vitest';
import type { Precedent } from '$lib/domain/precedent/precedent';
import type { SearchHit } from '$lib/domain/search/search-hit';
import { withDatabase } from '../../../fixtures/database';
import { request } from '../../../fixtures/request';

withDatabase();

const PLAN = await readFile(new URL('../../../fixtures/uploads/plan.json', import.meta.url));

function planFile(): File {
	return new File([PLAN], 'plan.json', { type: 'application/json' });
}

function formOf(parts: Record<string, string | File>): FormData {
	const form = new FormData();
	for (const [name, value] of Object.entries(parts)) form.append(name, value);
	return form;
}

async function logWithPlan(title: string): Promise<number> {
	const body = formOf({ incident: JSON.stringify({ title }), evidence: planFile() });
	const response = await request('POST', '/api/v1/incidents', { as: 'responder', body });
	expect(response.status).toBe(201);
	return (await response.json()).number;
}

async function itemsOf<T>(response: Response): Promise<T[]> {
	expect(response.status).toBe(200);
	return (await response.json()).items;
}

let shown: number;
beforeEach(async () => {
	shown = await logWithPlan('Month-end preview of staged lines is slow');
	await request('POST', '/api/v1/incidents', {
		as: 'responder',
		body: { title: 'Lighthouse lamp', narrative: 'The pool is exhausted.' }
	});
});

describe('POST /precedents', () => {
	it('refuses who is not signed in, a media type it cannot read, and an engine that is none', async () => {
		expect((await request('POST', '/api/v1/precedents', { body: { text: 'x' } })).status).toBe(401);
		const plain = await request('POST', '/api/v1/precedents', {
			as: 'reader',
			body: 'text',
			headers: { 'content-type': 'text/plain' }
		});
		expect(plain.status).toBe(415);
		const wrong = await request('POST', '/api/v1/precedents', {
			as: 'reader',
			body: formOf({ engine: 'abacus', evidence: planFile() })
		});
		expect(wrong.status).toBe(400);
		expect(await wrong.json()).toMatchObject({ code: 'invalid', errors: [{ field: 'engine' }] });
		const many = await request('POST', '/api/v1/precedents?limit=1000', {
			as: 'reader',
			body: { text: 'x' }
		});
		expect(many.status).toBe(400);
	});

	it('finds by evidence alone, and by words alone as JSON or as fields', async () => {
		const byPlan = await itemsOf<Precedent>(
			await request('POST', '/api/v1/precedents', { as: 'reader', body: formOf({ evidence: planFile() }) })
		);
		expect(byPlan[0]?.number).toBe(shown);
		expect(byPlan[0]?.reasons[0]?.text).toBeTruthy();
		const json = await itemsOf<Precedent>(
			await request('POST', '/api/v1/precedents', { as: 'reader', body: { text: 'lighthouse lamp' } })
		);
		const fields = await itemsOf<Precedent>(
			await request('POST', '/api/v1/precedents', { as: 'reader', body: formOf({ text: 'lighthouse lamp' }) })
		);
		expect(json.map((precedent) => precedent.title)).toEqual(['Lighthouse lamp']);
		expect(fields).toEqual(json);
	});

	it('answers an empty draft and an empty file with nothing found', async () => {
		const empty = formOf({ evidence: new File([], 'plan.json') });
		for (const body of [{}, empty]) {
			const items = await itemsOf<Precedent>(
				await request('POST', '/api/v1/precedents', { as: 'reader', body })
			);
			expect(items).toEqual([]);
		}
	});
});

describe('GET /incidents/{number}/precedents', () => {
	it('answers 404 for a number that nobody has', async () => {
		const response = await request('GET', '/api/v1/incidents/4711/precedents', { as: 'reader' });
		expect(response.status).toBe(404);
		expect(await response.json()).toMatchObject({ code: 'not_found' });
	});

	it('finds an incident logged a moment ago, with every field that the API promises', async () => {
		const twin = await logWithPlan('Berth list crawls');
		const response = await request('GET', `/api/v1/incidents/${shown}/precedents?limit=1`, { as: 'reader' });
		const [first] = await itemsOf<Precedent>(response);
		expect(first).toMatchObject({
			number: twin,
			title: 'Berth list crawls',
			state: 'open',
			resolvedAt: null,
			resolution: null,
			cause: null,
			verdict: null
		});
		expect(first?.score).toBeGreaterThan(0.5);
		expect(first?.reasons.reduce((sum, reason) => sum + reason.share, 0)).toBeCloseTo(1, 9);
	});
});

describe('GET /search', () => {
	it('refuses who is not signed in, and a kind that is none', async () => {
		expect((await request('GET', '/api/v1/search?q=lamp')).status).toBe(401);
		expect((await request('GET', '/api/v1/search?q=lamp&kind=ship', { as: 'reader' })).status).toBe(400);
	});

	it('finds by a number, by a beginning, by a table of the plan; and nothing for nothing', async () => {
		const idsFor = async (q: string) => {
			const response = await request('GET', `/api/v1/search?q=${encodeURIComponent(q)}&kind=incident`, {
				as: 'reader'
			});
			return (await itemsOf<SearchHit>(response)).map((hit) => hit.id);
		};
		expect(await idsFor(String(shown))).toEqual([String(shown)]);
		expect(await idsFor('previ')).toEqual([String(shown)]);
		expect(await idsFor('invoice_line')).toEqual([String(shown)]);
		expect(await idsFor('')).toEqual([]);
		expect(await idsFor('" OR 1=1 --')).toEqual([]);
	});
});
