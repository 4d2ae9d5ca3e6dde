import { link } from 'node:fs/promises';
import { SYSTEM } from '$lib/domain/person/person';
import type { Reading } from '$lib/domain/reading/reading';
import { write } from '../db/transaction';
import { insertEntry } from '../incidents/entry-store';
import { log } from '../log';
import { incidentChanged } from '../search/indexing';
import { findEvidenceById, replaceReadings, updateEvidence, type EvidenceRow } from './evidence-store';
import { keepLate, quoteName, settleFiles, type Kept } from './keep-evidence';
import type { ReadUpload } from './read-upload';
import { refreshIncident } from './refresh-incident';
import { removeFromSpool, waitingPath } from './spool';

/** Readings under way whose request has been answered; a clean stop waits for them. */
const underWay = new Set<Promise<void>>();

/** A reading that says why there is none. */
function interruptedReading(row: EvidenceRow, message: string): Reading {
	return {
		name: row.name,
		bytes: row.bytes,
		sha256: row.sha256,
		kind: 'unknown',
		format: 'unknown',
		engine: 'unknown',
		engineVersion: null,
		statement: null,
		plan: null,
		spills: null,
		trails: [],
		symptoms: [],
		causes: [],
		sizing: [],
		warnings: [{ code: 'reading-interrupted', message, at: null }]
	};
}

/** Marks evidence as failed, with a sentence in its reading and in the incident's log. */
export async function markFailed(row: EvidenceRow, message: string): Promise<void> {
	const now = new Date().toISOString();
	await write(async (transaction) => {
		await updateEvidence(row.id, { state: 'failed' }, transaction);
		await replaceReadings(row.id, [interruptedReading(row, message)], transaction);
		if (row.incidentNumber === null) return;
		await insertEntry(
			{
				incidentNumber: row.incidentNumber,
				at: now,
				text: `${quoteName(row.name)}: ${message}`,
				authorId: null,
				kind: 'evidence',
				createdAt: now
			},
			transaction
		);
		await incidentChanged(row.incidentNumber, transaction);
	});
}

async function keepReading(evidenceId: number, read: ReadUpload): Promise<void> {
	const now = new Date().toISOString();
	try {
		await write(async (transaction) => {
			// Removed by a curator while it was being read: nothing to keep.
			const row = await findEvidenceById(evidenceId);
			if (row === null) return;
			await keepLate({ actor: SYSTEM, incidentNumber: row.incidentNumber, now, transaction }, row, read);
			if (row.incidentNumber === null) return;
			const hints = read.hints === null ? [] : [read.hints];
			await refreshIncident(row.incidentNumber, hints, now, transaction);
			await incidentChanged(row.incidentNumber, transaction);
		});
	} finally {
		await removeFromSpool([read.maskedPath]);
		await settleFiles([read.sha256]);
	}
}

let isStopping = false;

/**
 * Leaves the readings under way to the next start, which finds their raw bytes in the spool. Called before
 * the workers are stopped: what they give up then has not failed.
 */
export function leaveReadings(): void {
	isStopping = true;
}

async function finish(evidenceId: number, reading: Promise<ReadUpload>, rawPath: string): Promise<void> {
	try {
		await keepReading(evidenceId, await reading);
	} catch (error) {
		if (isStopping) return;
		log().error({ err: error, evidenceId }, 'evidence could not be read');
		const row = await findEvidenceById(evidenceId);
		if (row !== null)
			await markFailed(row, 'Reading it failed. Attach it again; if it fails again, cut it shorter.');
	} finally {
		// Left behind while stopping: the next start reads on from it, or empties the spool of it.
		if (!isStopping) await removeFromSpool([rawPath, waitingPath(evidenceId)]);
	}
}

/** Lets a reading end in the background and keeps what it comes to. Never rejects. */
export function finishLater(evidenceId: number, reading: Promise<ReadUpload>, rawPath: string): void {
	const task = finish(evidenceId, reading, rawPath).catch((error: unknown) => {
		log().error({ err: error, evidenceId }, 'late evidence could not be settled');
	});
	underWay.add(task);
	void task.finally(() => underWay.delete(task));
}

/** Resolves when no reading is under way any more. */
export async function waitForReadings(): Promise<void> {
	while (underWay.size > 0) await Promise.all(underWay);
}

/**
 * Holds on to the raw bytes of what is still being read, under the name of its row: a crash before the end
 * can start over. Called before the row is acknowledged.
 */
export async function holdRaw(kept: readonly Kept[]): Promise<void> {
	for (const { evidenceId, pending, late } of kept)
		if (late) await link(pending.upload.path, waitingPath(evidenceId));
}
