import { describe, expect, it } from 'vitest';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import type { Precedent } from '$lib/domain/precedent/precedent';
import type { Outcome } from '$lib/domain/problem';
import type { Reading } from '$lib/domain/reading/reading';
import { EvidenceModel } from '$lib/server/db/models/evidence';
import { IncidentModel } from '$lib/server/db/models/incident';
import { ReadingModel } from '$lib/server/db/models/reading';
import { write } from '$lib/server/db/transaction';
import * as precedents from '$lib/server/precedents/precedents-service';
import { incidentChanged } from '$lib/server/search/indexing';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

withDatabase();

const AT = '2026-03-02T02:10:00.000Z';
const NOBODY = { ...SYSTEM, role: 'nobody' } as unknown as Actor;

async function log(fields: Parameters<typeof makeIncident>[0], readings: Reading[] = []): Promise<number> {
	const number = await makeIncident({
		title: 'Something',
		service: null,
		engine: null,
		database: null,
		...fields
	});
	await write(async (transaction) => {
		for (const [position, reading] of readings.entries()) {
			const { id } = await EvidenceModel.create({
				incidentNumber: number,
				sha256: String(position).padStart(64, '0'),
				name: reading.name,
				bytes: reading.bytes,
				kind: 'plan',
				format: reading.format,
				state: 'read',
				addedAt: AT,
				addedById: null
			});
			await ReadingModel.create({ evidenceId: id, position, body: JSON.stringify(reading) });
		}
		await incidentChanged(number, transaction);
	});
	return number;
}

function valueOf(outcome: Outcome<Precedent[]>): Precedent[] {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

/** The same plan, as another statement. */
function withFingerprint(fingerprint: string): Reading {
	const reading = makeOverflowingReading();
	return { ...reading, statement: { fingerprint, text: 'select other' } };
}

describe('forIncident', () => {
	it('refuses whoever may not read, and a number that nobody has', async () => {
		const number = await log({});
		expect(await precedents.forIncident(NOBODY, number)).toMatchObject({ problem: { code: 'forbidden' } });
		expect(await precedents.forIncident(SYSTEM, 99)).toMatchObject({ problem: { code: 'not_found' } });
	});

	it('finds nothing where nothing resembles it', async () => {
		const number = await log({ title: 'Crane slots' });
		await log({ title: 'Invoice preview' });
		expect(valueOf(await precedents.forIncident(SYSTEM, number))).toEqual([]);
	});

	it('leaves out itself and incidents merged into another', async () => {
		const number = await log({ title: 'Berth planner crawls' });
		const twin = await log({ title: 'Berth planner crawls' });
		const merged = await log({ title: 'Berth planner crawls' });
		await log({ title: 'Something else' });
		await write(() => IncidentModel.update({ mergedInto: twin }, { where: { number: merged } }));
		const found = valueOf(await precedents.forIncident(SYSTEM, number));
		expect(found.map((precedent) => precedent.number)).toEqual([twin]);
	});

	it('finds the same fault in other words, before the same words about something else', async () => {
		const asked = await log({ title: 'Month-end preview is slow' }, [makeOverflowingReading()]);
		await log({ title: 'Month-end preview is slow', narrative: 'A lock.' });
		const fault = await log({ title: 'Roll-over list crawls' }, [withFingerprint('f'.repeat(16))]);
		await log({ title: 'Healthy' }, [makeReading()]);
		const [first] = valueOf(await precedents.forIncident(SYSTEM, asked));
		expect(first?.number).toBe(fault);
		const texts = first?.reasons.map((reason) => reason.text).join('\n');
		expect(texts).toContain('likely cause of both: stale statistics');
		expect(texts).toContain('row underestimate at a seq scan of invoice_line');
	});

	it('marks what began later, and shows what ended it, cut to 300 characters', async () => {
		const asked = await log({ startedAt: '2026-02-01T00:00:00.000Z' }, [makeOverflowingReading()]);
		const fields = {
			state: 'resolved' as const,
			resolution: 'Analyzed. '.repeat(60),
			cause: 'stale-statistics'
		};
		const earlier = await log({ ...fields, startedAt: '2026-01-01T00:00:00.000Z' }, [
			makeOverflowingReading()
		]);
		const later = await log({ ...fields, startedAt: '2026-03-01T00:00:00.000Z' }, [makeOverflowingReading()]);
		const found = valueOf(await precedents.forIncident(SYSTEM, asked));
		expect(new Map(found.map((precedent) => [precedent.number, precedent.later]))).toEqual(
			new Map([
				[earlier, false],
				[later, true]
			])
		);
		expect(found[0]?.resolution).toHaveLength(300);
		expect(found[0]).toMatchObject({ state: 'resolved', cause: 'stale-statistics', verdict: null });
		expect(found.flatMap((precedent) => precedent.reasons.map((reason) => reason.text))).toEqual(
			expect.arrayContaining(['same statement, 31 days ago', 'same statement, 28 days later'])
		);
	});

	it('gives reasons whose shares add up to 1, for each precedent', async () => {
		const asked = await log({ title: 'Preview slow', narrative: 'batches spilled' }, [
			makeOverflowingReading()
		]);
		await log({ title: 'Preview slow again', narrative: 'the batch spilled' }, [makeOverflowingReading()]);
		await log({ title: 'Preview', narrative: 'spilled' });
		for (let i = 0; i < 5; i++) await log({ title: `Crane ${i}` });
		const found = valueOf(await precedents.forIncident(SYSTEM, asked));
		expect(found.length).toBeGreaterThan(1);
		for (const precedent of found) {
			expect(precedent.reasons.reduce((sum, reason) => sum + reason.share, 0)).toBeCloseTo(1, 9);
			expect(precedent.score).toBeGreaterThan(0);
			expect(precedent.score).toBeLessThanOrEqual(1);
		}
	});

	it('is found by others as soon as its evidence has been read', async () => {
		const asked = await log({}, [makeOverflowingReading()]);
		const other = await log({});
		expect(valueOf(await precedents.forIncident(SYSTEM, asked))).toEqual([]);
		await write(async (transaction) => {
			const { id } = await EvidenceModel.create({
				incidentNumber: other,
				sha256: 'b'.repeat(64),
				name: 'plan.json',
				bytes: 1,
				kind: 'plan',
				format: 'postgres-json',
				state: 'read',
				addedAt: AT,
				addedById: null
			});
			await ReadingModel.create({
				evidenceId: id,
				position: 0,
				body: JSON.stringify(makeOverflowingReading())
			});
			await incidentChanged(other, transaction);
		});
		const found = valueOf(await precedents.forIncident(SYSTEM, asked));
		expect(found.map((precedent) => precedent.number)).toEqual([other]);
	});
});

describe('forDraft', () => {
	it('refuses whoever may not read', async () => {
		expect(await precedents.forDraft(NOBODY, { text: 'spilled' })).toMatchObject({
			problem: { code: 'forbidden' }
		});
	});

	it('finds nothing for an empty draft, nor for a service alone', async () => {
		await log({ title: 'Preview', service: 'billing' });
		expect(valueOf(await precedents.forDraft(SYSTEM, {}))).toEqual([]);
		expect(valueOf(await precedents.forDraft(SYSTEM, { service: 'billing' }))).toEqual([]);
	});

	it('works on words alone and on evidence alone, and stores neither', async () => {
		const told = await log({ title: 'Lighthouse report', narrative: 'The hash spilled to temp files.' });
		const shown = await log({ title: 'Preview' }, [makeOverflowingReading()]);
		for (let i = 0; i < 5; i++) await log({ title: `Crane ${i}` });
		const byWords = valueOf(await precedents.forDraft(SYSTEM, { text: 'lighthouse: temporary files' }));
		expect(byWords[0]?.number).toBe(told);
		const byEvidence = valueOf(await precedents.forDraft(SYSTEM, { readings: [makeOverflowingReading()] }));
		expect(byEvidence[0]?.number).toBe(shown);
		expect(await IncidentModel.count()).toBe(7);
	});

	it('answers hostile text like any other', async () => {
		await log({ title: 'Preview' });
		const text = `"' OR 1=1; DROP TABLE incidents; -- NEAR(a b) title:x * ^ \0 {}`;
		expect((await precedents.forDraft(SYSTEM, { text, service: text })).ok).toBe(true);
		expect(await IncidentModel.count()).toBe(1);
	});
});
