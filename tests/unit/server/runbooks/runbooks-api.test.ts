import { describe, expect, it } from 'vitest';
import { cautionShape, runbookShape, runbookSummaryShape } from '$lib/server/api/shapes/runbook';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { withDatabase } from '../../../fixtures/database';
import { request } from '../../../fixtures/request';

withDatabase();

describe('GET /api/v1/runbooks', () => {
	it('refuses a filter that does not fit, naming the field', async () => {
		const response = await request('GET', '/api/v1/runbooks?symptom=slow', { as: 'reader' });
		expect(response.status).toBe(400);
		expect((await response.json()).errors[0].field).toBe('symptom');
	});

	it('lists exactly the fields of the document, with a link to the next page', async () => {
		await runbooks.adoptContent();
		const response = await request('GET', '/api/v1/runbooks?limit=2', { as: 'reader' });
		const page = await response.json();
		for (const item of page.items) expect(runbookSummaryShape.strict().parse(item)).toEqual(item);
		expect(response.headers.get('link')).toContain('rel="next"');
	});
});

describe('GET /api/v1/runbooks/{slug}', () => {
	it('answers problem+json for a name that there is not', async () => {
		const response = await request('GET', '/api/v1/runbooks/nothing', { as: 'reader' });
		expect(response.status).toBe(404);
		expect(response.headers.get('content-type')).toBe('application/problem+json');
	});

	it('answers the runbook with its revision as ETag', async () => {
		await runbooks.adoptContent();
		const response = await request('GET', '/api/v1/runbooks/keep-a-bitmap-exact', { as: 'reader' });
		expect(response.headers.get('etag')).toBe('"1"');
		const runbook = await response.json();
		expect(runbookShape.strict().parse(runbook)).toEqual(runbook);
	});
});

describe('POST /api/v1/cautions', () => {
	it('refuses a body without an engine', async () => {
		const response = await request('POST', '/api/v1/cautions', { as: 'reader', body: { sql: 'select 1' } });
		expect(response.status).toBe(400);
		expect((await response.json()).errors[0].field).toBe('engine');
	});

	it('answers one caution a statement', async () => {
		const body = {
			engine: 'postgresql',
			engineVersion: '15.18',
			sql: 'analyze invoice_line; truncate invoice_line'
		};
		const response = await request('POST', '/api/v1/cautions', { as: 'reader', body });
		expect(response.status).toBe(200);
		const { items } = await response.json();
		expect(items.map(({ kind }: { kind: string }) => kind)).toEqual(['analyze', 'truncate']);
		for (const item of items) expect(cautionShape.strict().parse(item)).toEqual(item);
	});
});
