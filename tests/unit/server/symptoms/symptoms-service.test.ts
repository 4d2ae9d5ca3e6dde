import { describe, expect, it } from 'vitest';
import { SYSTEM } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import { SYMPTOM_IDS, type SymptomId } from '$lib/domain/symptom/symptom';
import { symptomPageShape, symptomSummaryShape } from '$lib/server/api/shapes/symptom';
import { execute } from '$lib/server/db/query';
import { write } from '$lib/server/db/transaction';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import * as symptoms from '$lib/server/symptoms/symptoms-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { request } from '../../../fixtures/request';

withDatabase();

function valueOf<T>(outcome: Outcome<T>): T {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

async function meet(symptomId: SymptomId, fields: Parameters<typeof makeIncident>[0] = {}): Promise<number> {
	const number = await makeIncident(fields);
	await write(() =>
		execute(
			'INSERT INTO incidentSymptoms (incidentNumber, symptomId, weight) VALUES (:number, :symptomId, 0.5)',
			{
				number,
				symptomId
			}
		)
	);
	return number;
}

describe('list', () => {
	it('lists the whole catalogue where nothing was met', async () => {
		const { items } = valueOf(await symptoms.list(SYSTEM));
		expect(items.map(({ id }) => id)).toEqual([...SYMPTOM_IDS]);
		expect(items.every(({ incidents, lastAt }) => incidents === 0 && lastAt === null)).toBe(true);
	});

	it('puts first what is met most often, merged incidents left out', async () => {
		await meet('jit-dominates');
		await meet('jit-dominates', { state: 'contained' });
		const heir = await meet('sort-spill', { state: 'resolved' });
		await meet('sort-spill', { mergedInto: heir });
		await meet('sort-spill', { mergedInto: heir });
		const { items } = valueOf(await symptoms.list(SYSTEM));
		expect(items.slice(0, 2).map(({ id, incidents, open }) => [id, incidents, open])).toEqual([
			['jit-dominates', 2, 2],
			['sort-spill', 1, 0]
		]);
	});

	it('says which symptom no published runbook serves', async () => {
		await runbooks.adoptContent();
		const { items } = valueOf(await symptoms.list(SYSTEM));
		const served = new Map(items.map(({ id, runbooks: count }) => [id, count]));
		expect(served.get('jit-dominates')).toBe(1);
		expect(served.get('grant-wait')).toBe(0);
	});
});

describe('read', () => {
	it('knows no symptom of another name', async () => {
		expect(await symptoms.read(SYSTEM, 'slowness')).toMatchObject({
			ok: false,
			problem: { code: 'not_found' }
		});
	});

	it('gives definition, thresholds with their reasons, causes, runbooks and the incidents', async () => {
		await runbooks.adoptContent();
		const number = await meet('hash-spill', { startedAt: new Date().toISOString() });
		const page = valueOf(await symptoms.read(SYSTEM, 'hash-spill'));
		expect(page.recognise.length).toBeGreaterThan(20);
		expect(page.thresholds.every(({ why }) => why.length > 5)).toBe(true);
		expect(page.usualCauses.map(({ id }) => id)).toContain('undersized-memory');
		expect(page.runbooks.length).toBeGreaterThan(1);
		expect(page.recent.map((incident) => incident.number)).toEqual([number]);
		expect(page.months).toHaveLength(12);
		expect(page.months.at(-1)?.incidents).toBe(1);
	});
});

describe('GET /api/v1/symptoms', () => {
	it('answers exactly the fields of the document', async () => {
		const response = await request('GET', '/api/v1/symptoms', { as: 'reader' });
		for (const item of (await response.json()).items)
			expect(symptomSummaryShape.strict().parse(item)).toEqual(item);
	});

	it('answers one with all its parts, and 404 for one that there is not', async () => {
		const response = await request('GET', '/api/v1/symptoms/sort-spill', { as: 'reader' });
		const page = await response.json();
		expect(symptomPageShape.strict().parse(page)).toEqual(page);
		expect((await request('GET', '/api/v1/symptoms/slowness', { as: 'reader' })).status).toBe(404);
	});
});
