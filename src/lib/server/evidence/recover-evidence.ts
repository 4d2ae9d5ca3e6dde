import { access } from 'node:fs/promises';
import { log } from '../log';
import { findEvidenceById, listUnread } from './evidence-store';
import { settleFiles } from './keep-evidence';
import { finishLater, markFailed } from './late-reading';
import { readUpload } from './read-upload';
import { emptySpool, waitingPath } from './spool';

async function isThere(path: string): Promise<boolean> {
	try {
		await access(path);
		return true;
	} catch (_missing) {
		// Gone with the process that was reading it.
		return false;
	}
}

/**
 * Called once at every start: empties the spool of raw bytes, takes up the readings that the last process
 * could not end, and settles files whose row was being written when it stopped. Answers how many readings
 * were taken up; they go on in the background.
 */
export async function recoverEvidence(): Promise<number> {
	const unread = await listUnread();
	const waiting = new Set(unread.map(({ id }) => waitingPath(id)));
	await emptySpool(waiting);
	await settleFiles();
	let resumed = 0;
	for (const row of unread) {
		const path = waitingPath(row.id);
		if (await isThere(path)) {
			resumed += 1;
			finishLater(row.id, readUpload(path, row.name), path);
			continue;
		}
		log().warn({ evidenceId: row.id }, 'evidence was lost while it was being read');
		const current = await findEvidenceById(row.id);
		if (current !== null)
			await markFailed(current, 'The server stopped while this was being read. Attach it again.');
	}
	return resumed;
}
