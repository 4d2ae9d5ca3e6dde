import { describe, expect, it } from 'vitest';
import type { Reading } from '$lib/domain/reading/reading';
import { AttemptModel } from '$lib/server/db/models/attempt';
import { AttemptStepModel } from '$lib/server/db/models/attempt-step';
import { EvidenceModel } from '$lib/server/db/models/evidence';
import { IncidentSymptomModel } from '$lib/server/db/models/incident-symptom';
import { ReadingModel } from '$lib/server/db/models/reading';
import { RunbookModel } from '$lib/server/db/models/runbook';
import { RunbookRevisionModel } from '$lib/server/db/models/runbook-revision';
import { write } from '$lib/server/db/transaction';
import * as watch from '$lib/server/watch/watch-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makePerson } from '../../../fixtures/factories/person';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';

const now = new Date('2026-12-01T02:14:00Z');
const MB = 1024 ** 2;

withDatabase();

async function attach(incident: number | null, reading: Reading, addedAt = now.toISOString()): Promise<void> {
	await write(async () => {
		const evidence = await EvidenceModel.create({
			incidentNumber: incident,
			sha256: reading.sha256,
			name: reading.name,
			bytes: reading.bytes,
			kind: reading.kind === 'log' ? 'log' : 'plan',
			format: reading.format,
			state: 'read',
			addedAt,
			addedById: null
		});
		await ReadingModel.create({ evidenceId: evidence.id, position: 0, body: JSON.stringify(reading) });
	});
}

function makeLog(bytes: number, files: number): Reading {
	const spills = { events: files, files, bytes, statements: [] };
	return makeReading({ name: 'server.log', kind: 'log', format: 'postgres-log', spills });
}

async function publish(slug: string, fields: { symptoms: string[]; engines?: string[]; reviewDue?: string }) {
	await write(async () => {
		const at = '2026-01-10T08:00:00.000Z';
		const runbook = await RunbookModel.create({
			slug,
			state: 'published',
			ownerId: null,
			reviewerId: null,
			reviewDue: fields.reviewDue ?? null,
			revision: 1,
			publishedRevision: 1,
			createdAt: at,
			updatedAt: at
		});
		await RunbookRevisionModel.create({
			runbookId: runbook.id,
			revision: 1,
			title: `Title of ${slug}`,
			summary: '',
			body: '',
			engines: JSON.stringify(fields.engines ?? ['postgresql']),
			symptoms: JSON.stringify(fields.symptoms),
			reviewEveryDays: 180,
			createdAt: at,
			createdById: null
		});
	});
}

async function tryFix(incidentNumber: number, fields: Partial<AttemptModel> & { steps?: boolean[] }) {
	const { steps = [], ...columns } = fields;
	return write(async () => {
		const attempt = await AttemptModel.create({
			incidentNumber,
			runbookSlug: 'refresh-statistics',
			runbookRevision: 1,
			title: 'Refresh statistics of one table',
			startedAt: '2026-12-01T01:44:00.000Z',
			endedAt: null,
			byId: null,
			outcome: null,
			note: null,
			beforeEvidenceId: null,
			afterEvidenceId: null,
			revision: 1,
			...columns
		});
		for (const [index, ticked] of steps.entries())
			await AttemptStepModel.create({
				attemptId: attempt.id,
				number: index + 1,
				tickedAt: ticked ? '2026-12-01T01:50:00.000Z' : null,
				byId: null,
				skipped: null
			});
		return attempt.id;
	});
}

async function look() {
	const { actor } = await makePerson({ role: 'reader' });
	const outcome = await watch.overview(actor, now);
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

describe('overview', () => {
	it('says of an empty installation that nothing was ever logged', async () => {
		const seen = await look();
		expect(seen).toMatchObject({ open: [], openTotal: 0, contained: [], attempts: [], incidents: 0 });
		expect(seen.weeks).toHaveLength(12);
		expect(seen.weeks.every((week) => week.temporaryBytes === null)).toBe(true);
	});

	it('lists what nobody is on first, then by severity, then the oldest', async () => {
		const { id: ownerId } = await makePerson();
		const taken = await makeIncident({ ownerId, severity: 1 });
		const younger = await makeIncident({ severity: 2, startedAt: '2026-11-30T00:00:00.000Z' });
		const older = await makeIncident({ severity: 2, startedAt: '2026-11-29T00:00:00.000Z' });
		const mild = await makeIncident({ severity: 4, startedAt: '2026-11-01T00:00:00.000Z' });
		expect((await look()).open.map((incident) => incident.number)).toEqual([older, younger, mild, taken]);
	});

	it('leaves out what is resolved and what was merged into another', async () => {
		const kept = await makeIncident();
		await makeIncident({ state: 'resolved' });
		await makeIncident({ mergedInto: kept });
		const seen = await look();
		expect(seen.open.map((incident) => incident.number)).toEqual([kept]);
		expect(seen.openTotal).toBe(1);
		expect(seen.incidents).toBe(3);
	});

	it('counts from when an incident was noticed, else from when it began', async () => {
		await makeIncident({ startedAt: '2026-12-01T00:40:00.000Z', detectedAt: '2026-12-01T01:05:00.000Z' });
		expect((await look()).open[0]?.since).toBe('2026-12-01T01:05:00.000Z');
	});

	it('lists the contained whose cause nobody has named', async () => {
		const unknown = await makeIncident({ state: 'contained', cause: null });
		await makeIncident({ state: 'contained', cause: 'stale-statistics' });
		expect((await look()).contained.map((incident) => incident.number)).toEqual([unknown]);
	});

	it('names the operator of the heaviest spill, the bytes of its plan and the files of its log', async () => {
		const number = await makeIncident();
		await attach(number, makeOverflowingReading());
		await attach(number, makeLog(65 * MB, 16));
		expect((await look()).open[0]?.overflow).toEqual({
			where: 'hash join on invoice_no',
			temporaryBytes: 57_671_680 + 11_665_408,
			files: 16
		});
	});

	it('tells of a log alone without saying where', async () => {
		const number = await makeIncident();
		await attach(number, makeLog(412 * MB, 3));
		expect((await look()).open[0]?.overflow).toEqual({ where: null, temporaryBytes: 412 * MB, files: 3 });
	});

	it('tells of no overflow where the evidence shows none', async () => {
		const number = await makeIncident();
		await attach(number, makeReading());
		await attach(number, makeLog(0, 0));
		expect((await look()).open[0]?.overflow).toBeNull();
	});
});

describe('the next step of an open incident', () => {
	it('is to take it while nobody is on it, even with an attempt under way', async () => {
		const number = await makeIncident();
		await tryFix(number, { steps: [false] });
		expect((await look()).open[0]?.next).toEqual({ kind: 'take' });
	});

	it('is the first step of the attempt under way that is not done', async () => {
		const { id: ownerId } = await makePerson();
		const number = await makeIncident({ ownerId });
		const attempt = await tryFix(number, { steps: [true, false, true, false, false] });
		const seen = await look();
		expect(seen.open[0]?.next).toMatchObject({ kind: 'follow', attempt, step: 2, of: 5 });
		expect(seen.attempts).toMatchObject([{ id: attempt, incident: number, step: 2, of: 5 }]);
	});

	it('is to record the outcome when every step is done', async () => {
		const { id: ownerId } = await makePerson();
		const number = await makeIncident({ ownerId });
		await tryFix(number, { steps: [true, true] });
		expect((await look()).open[0]?.next).toMatchObject({ kind: 'record', runbook: 'refresh-statistics' });
	});

	it('is to add evidence where there is none', async () => {
		const { id: ownerId } = await makePerson();
		await makeIncident({ ownerId });
		expect((await look()).open[0]?.next).toEqual({ kind: 'evidence' });
	});

	it('is to choose among the published runbooks for its symptoms on its engine', async () => {
		const { id: ownerId } = await makePerson();
		const number = await makeIncident({ ownerId });
		await attach(number, makeOverflowingReading());
		await write(() =>
			IncidentSymptomModel.create({ incidentNumber: number, symptomId: 'hash-spill', weight: 0.8 })
		);
		await publish('give-memory', { symptoms: ['hash-spill', 'sort-spill'] });
		await publish('for-another-engine', { symptoms: ['hash-spill'], engines: ['mariadb'] });
		await publish('for-another-symptom', { symptoms: ['deep-offset'] });
		expect((await look()).open[0]?.next).toEqual({ kind: 'runbook', count: 1 });
	});

	it('is to write what was tried where no runbook serves its symptoms', async () => {
		const { id: ownerId } = await makePerson();
		const number = await makeIncident({ ownerId });
		await attach(number, makeOverflowingReading());
		expect((await look()).open[0]?.next).toEqual({ kind: 'write' });
	});
});

describe('what lies beside it', () => {
	it('sums the logs of a week at the time of their incident, else when they were added', async () => {
		const number = await makeIncident({ startedAt: '2026-11-24T03:00:00.000Z', state: 'resolved' });
		await attach(number, makeLog(100 * MB, 4));
		await attach(null, makeLog(7 * MB, 1), '2026-11-30T05:00:00.000Z');
		await attach(null, makeLog(9 * MB, 1), '2026-06-01T05:00:00.000Z');
		expect((await look()).weeks.slice(-2)).toEqual([
			{ from: '2026-11-23', temporaryBytes: 100 * MB, logs: 1 },
			{ from: '2026-11-30', temporaryBytes: 7 * MB, logs: 1 }
		]);
	});

	it('lists the fixes that worked, the latest first, and no others', async () => {
		const number = await makeIncident({ state: 'resolved' });
		const first = await tryFix(number, { outcome: 'worked', endedAt: '2026-11-20T10:00:00.000Z' });
		const second = await tryFix(number, { outcome: 'worked', endedAt: '2026-11-28T10:00:00.000Z' });
		await tryFix(number, { outcome: 'no-effect', endedAt: '2026-11-29T10:00:00.000Z' });
		expect((await look()).worked.map((fix) => fix.attempt)).toEqual([second, first]);
	});

	it('lists the runbooks due within a fortnight, the most overdue first', async () => {
		await publish('later', { symptoms: [], reviewDue: '2026-12-20T00:00:00.000Z' });
		await publish('soon', { symptoms: [], reviewDue: '2026-12-10T00:00:00.000Z' });
		await publish('overdue', { symptoms: [], reviewDue: '2026-11-20T00:00:00.000Z' });
		expect((await look()).reviews.map((review) => review.slug)).toEqual(['overdue', 'soon']);
	});
});
