import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { Evidence } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import { write } from '$lib/server/db/transaction';
import { markPending, evidencePath } from '$lib/server/evidence/evidence-files';
import * as evidence from '$lib/server/evidence/evidence-service';
import { insertEvidence } from '$lib/server/evidence/evidence-store';
import { waitForReadings } from '$lib/server/evidence/late-reading';
import { recoverEvidence } from '$lib/server/evidence/recover-evidence';
import { waitingPath } from '$lib/server/evidence/spool';
import * as incidents from '$lib/server/incidents/incidents-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';
import { listDataFiles, readUploadFixture, spool, spoolFixture } from '../../../fixtures/spool';

withDatabase();
afterEach(() => {
	vi.restoreAllMocks();
});

/** What the answer waits for readings is over at once; every other timer runs as ever. */
function loseNoTimeWaiting(): void {
	const setTimer = globalThis.setTimeout;
	const hurried = (run: () => void, ms?: number): NodeJS.Timeout => setTimer(run, ms === 15_000 ? 0 : ms);
	vi.spyOn(globalThis, 'setTimeout').mockImplementation(hurried as typeof setTimeout);
}

async function read(actor: Actor, number: number) {
	const found = await incidents.read(actor, number);
	if (!found.ok) throw new Error(found.problem.detail);
	return found.value;
}

/** A row whose reading a crash cut off, with or without the raw bytes that it was read from. */
async function cutOff(number: number, raw: Buffer | null): Promise<number> {
	const id = await write((transaction) =>
		insertEvidence(
			{
				incidentNumber: number,
				sha256: '',
				name: 'server.log',
				bytes: 10,
				kind: 'other',
				format: 'unknown',
				state: 'reading',
				addedAt: '2026-03-02T02:30:00.000Z',
				addedById: null
			},
			transaction
		)
	);
	if (raw !== null) {
		await mkdir(path.dirname(waitingPath(id)), { recursive: true });
		await writeFile(waitingPath(id), raw);
	}
	return id;
}

describe('attach, when reading takes longer than an answer may', () => {
	it('answers that it is being read, and keeps the reading when it ends', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const log = await readUploadFixture('server.log');
		const upload = await spool('server.log', Buffer.concat(Array.from({ length: 400 }, () => log)));
		loseNoTimeWaiting();
		const attached = await evidence.attach(actor, number, [upload]);
		const [answered]: Evidence[] = attached.ok ? attached.value : [];
		expect(answered).toMatchObject({ state: 'reading', sha256: '', readings: [] });
		await waitForReadings();
		const incident = await read(actor, number);
		expect(incident.evidence).toMatchObject([{ id: answered?.id, state: 'read', format: 'postgres-log' }]);
		expect(incident.evidence[0]?.readings[0]?.spills?.files).toBeGreaterThan(0);
		expect(incident.entries.map(({ author }) => author?.id ?? null)).toEqual([actor.personId, null]);
		expect(await listDataFiles('evidence')).toEqual([incident.evidence[0]?.sha256]);
		expect(await listDataFiles('spool')).toEqual([]);
	});
});

describe('recoverEvidence', () => {
	it('marks as failed, with a sentence, what it has no bytes of', async () => {
		const number = await makeIncident();
		await cutOff(number, null);
		expect(await recoverEvidence()).toBe(0);
		const { evidence: held, entries } = await read(await makeActor('reader'), number);
		expect(held).toMatchObject([{ state: 'failed' }]);
		expect(held[0]?.readings[0]?.warnings[0]?.message).toContain('Attach it again');
		expect(entries.at(-1)?.text).toContain('Attach it again');
	});

	it('takes up a reading that was cut off', async () => {
		const number = await makeIncident();
		await cutOff(number, await readUploadFixture('server.log'));
		expect(await recoverEvidence()).toBe(1);
		await waitForReadings();
		const { evidence: held } = await read(await makeActor('reader'), number);
		expect(held).toMatchObject([{ state: 'read', format: 'postgres-log' }]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('keeps once what turns out to be there already', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		await evidence.attach(actor, number, [await spoolFixture('server.log')]);
		await cutOff(number, await readUploadFixture('server.log'));
		await recoverEvidence();
		await waitForReadings();
		const { evidence: held, entries } = await read(actor, number);
		expect(held).toHaveLength(1);
		expect(entries.at(-1)?.text).toContain('kept once');
		expect(await listDataFiles('evidence')).toEqual([held[0]?.sha256]);
	});

	it('empties the spool of bytes that nobody waits for', async () => {
		await spoolFixture('server.log');
		await recoverEvidence();
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('removes a file whose row was never written, and none that has its row', async () => {
		const actor = await makeActor('responder');
		const [kept] = await evidence
			.attach(actor, null, [await spoolFixture('plan.json')])
			.then((outcome) => (outcome.ok ? outcome.value : []));
		const orphan = 'ab'.repeat(32);
		await mkdir(path.dirname(evidencePath(orphan)), { recursive: true });
		await writeFile(evidencePath(orphan), 'masked');
		await markPending(orphan);
		await markPending(kept?.sha256 ?? '');
		await recoverEvidence();
		expect(await listDataFiles('evidence')).toEqual([kept?.sha256]);
	});
});
