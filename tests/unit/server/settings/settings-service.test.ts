import { stat } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { settingsPatch } from '$lib/domain/settings/settings';
import { AuditModel } from '$lib/server/db/models/audit';
import { EntryModel } from '$lib/server/db/models/entry';
import { EvidenceModel } from '$lib/server/db/models/evidence';
import { IncidentModel } from '$lib/server/db/models/incident';
import { ReadingModel } from '$lib/server/db/models/reading';
import { write } from '$lib/server/db/transaction';
import { database } from '$lib/server/db/connection';
import { evidencePath } from '$lib/server/evidence/evidence-files';
import * as evidence from '$lib/server/evidence/evidence-service';
import { countDue, expireEvidence } from '$lib/server/evidence/retention';
import { checkFolder } from '$lib/server/integrity/check-folder';
import * as settings from '$lib/server/settings/settings-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';
import { spoolFixture } from '../../../fixtures/spool';

const LONG_AGO = '2026-01-10T00:00:00.000Z';

withDatabase();

describe('update', () => {
	it.each(['reader', 'responder', 'curator'] as const)('refuses a %s', async (role) => {
		const actor = await makeActor(role);
		expect(await settings.read(actor)).toMatchObject({ problem: { code: 'forbidden' } });
		const changed = await settings.update(actor, 1, { evidenceDays: 90 });
		expect(changed).toMatchObject({ problem: { code: 'forbidden' } });
		expect(await settings.currentSettings()).toEqual({ evidenceDays: null, revision: 1 });
	});

	it.each([0, 1, 29, 3651, 90.5, -30])('takes no %s days', (evidenceDays) => {
		expect(settingsPatch.safeParse({ evidenceDays }).success).toBe(false);
	});

	it('overwrites nothing of a newer revision', async () => {
		const actor = await makeActor('administrator');
		await settings.update(actor, 1, { evidenceDays: 90 });
		const late = await settings.update(actor, 1, { evidenceDays: 365 });
		expect(late).toMatchObject({ problem: { code: 'stale', current: { evidenceDays: 90, revision: 2 } } });
	});

	it('leaves what was and what is in the audit trail', async () => {
		const actor = await makeActor('administrator');
		await settings.update(actor, 1, { evidenceDays: 90 });
		await settings.update(actor, 2, { evidenceDays: null });
		const lines = await AuditModel.findAll({ where: { action: 'settings.update' }, order: ['id'] });
		expect(lines.map(({ detail }) => JSON.parse(detail))).toMatchObject([
			{ from: null, to: 90 },
			{ from: 90, to: null }
		]);
	});
});

/** An incident in a state with the fixture's plan; answers the row of the evidence. */
async function makeEvidence(state: 'resolved' | 'reviewed', age: string): Promise<EvidenceModel> {
	const number = await makeIncident({ state, resolvedAt: age });
	const actor = await makeActor('responder');
	const attached = await evidence.attach(actor, number, [await spoolFixture('plan.json')]);
	if (!attached.ok) throw new Error(attached.problem.detail);
	await write(() => EvidenceModel.update({ addedAt: age }, { where: { incidentNumber: number } }));
	return EvidenceModel.findOne({ where: { incidentNumber: number }, rejectOnEmpty: true });
}

async function keepFor(evidenceDays: number | null): Promise<void> {
	await settings.update(await makeActor('administrator'), 1, { evidenceDays });
}

async function isStored(sha256: string): Promise<boolean> {
	return stat(evidencePath(sha256)).then(
		() => true,
		() => false
	);
}

describe('expireEvidence', () => {
	it('removes nothing where nobody set a time', async () => {
		const { sha256 } = await makeEvidence('reviewed', LONG_AGO);
		expect(await expireEvidence()).toBe(0);
		expect(await isStored(sha256)).toBe(true);
	});

	it('leaves what is not reviewed, and what is not old enough', async () => {
		const open = await makeEvidence('resolved', LONG_AGO);
		const fresh = await makeEvidence('reviewed', new Date().toISOString());
		await keepFor(30);
		expect(await expireEvidence()).toBe(0);
		expect(await isStored(open.sha256)).toBe(true);
		expect(fresh.sha256).toBe(open.sha256);
	});

	it('leaves a file that was added to an old incident only now', async () => {
		const { id, sha256 } = await makeEvidence('reviewed', LONG_AGO);
		await write(() => EvidenceModel.update({ addedAt: new Date().toISOString() }, { where: { id } }));
		await keepFor(30);
		expect(await expireEvidence()).toBe(0);
		expect(await isStored(sha256)).toBe(true);
	});

	it('leaves bytes that another incident still needs', async () => {
		await makeEvidence('reviewed', LONG_AGO);
		const { sha256 } = await makeEvidence('resolved', LONG_AGO);
		await keepFor(30);
		expect(await expireEvidence()).toBe(1);
		expect(await isStored(sha256)).toBe(true);
	});

	it('takes the file, and leaves the readings, a line in the log, one in the trail and a sound folder', async () => {
		const { id, sha256, ...row } = (await makeEvidence('reviewed', LONG_AGO)).get();
		const incidentNumber = row.incidentNumber ?? 0;
		await keepFor(30);
		expect(await countDue(await makeActor('administrator'), 30)).toEqual({ ok: true, value: 1 });
		expect(await expireEvidence()).toBe(1);
		expect(await isStored(sha256)).toBe(false);
		expect(await EvidenceModel.findByPk(id)).toMatchObject({ sha256: '', state: 'read' });
		expect(await ReadingModel.count({ where: { evidenceId: id } })).toBeGreaterThan(0);
		const entries = await EntryModel.findAll({ where: { incidentNumber }, order: ['id'] });
		expect(entries.at(-1)).toMatchObject({ authorId: null, text: expect.stringContaining('no longer kept') });
		expect(await AuditModel.count({ where: { action: 'evidence.expire', actorId: null } })).toBe(1);
		expect((await checkFolder(database())).faults).toEqual([]);
		expect(await IncidentModel.findByPk(incidentNumber)).toMatchObject({ state: 'reviewed' });
	});

	it('stops between two files when it is told to', async () => {
		await makeEvidence('reviewed', LONG_AGO);
		await keepFor(30);
		expect(await expireEvidence(() => true)).toBe(0);
	});
});
