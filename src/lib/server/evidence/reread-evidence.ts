import { write } from '../db/transaction';
import * as readingPool from '../readings/reading-pool';
import { incidentChanged } from '../search/indexing';
import { evidencePath } from './evidence-files';
import { listReadable, replaceReadings, updateEvidence, type EvidenceRow } from './evidence-store';
import { kindOf } from './read-upload';
import { refreshIncident } from './refresh-incident';

/** What reading everything again came to. */
export interface Reread {
	read: number;
	/** A line for each piece that could not be read. */
	faults: string[];
}

/** Reads one stored piece again; readings, symptoms and index change in one transaction. */
async function rereadOne(row: EvidenceRow): Promise<void> {
	const { readings, hints } = await readingPool.readFile(evidencePath(row.sha256), row.name, null);
	const now = new Date().toISOString();
	await write(async (transaction) => {
		const format = readings[0]?.format ?? 'unknown';
		const kind = kindOf(readings, row.kind === 'picture');
		await updateEvidence(row.id, { format, kind, state: 'read' }, transaction);
		await replaceReadings(row.id, readings, transaction);
		if (row.incidentNumber === null) return;
		await refreshIncident(row.incidentNumber, hints === null ? [] : [hints], now, transaction);
		await incidentChanged(row.incidentNumber, transaction);
	});
}

/**
 * Reads all stored evidence again from its masked bytes. What fails keeps the readings that it had, and
 * doesn't keep the rest back.
 */
export async function rereadAll(): Promise<Reread> {
	const result: Reread = { read: 0, faults: [] };
	for (const row of await listReadable()) {
		try {
			await rereadOne(row);
			result.read += 1;
		} catch (error) {
			// Whatever it was (a missing file, a reader's fault), it is told, and the next piece is read.
			const reason = error instanceof Error ? error.message : String(error);
			result.faults.push(`evidence ${row.id} (${row.name}): ${reason}`);
		}
	}
	return result;
}
