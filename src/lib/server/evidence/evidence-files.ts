import { mkdir, open, readdir, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { config } from '../config';
import { PRIVATE_FILE } from './spool';

const PRIVATE_FOLDER = 0o700;

function evidenceFolder(): string {
	return path.join(config().dataDir, 'evidence');
}

/** Marks of bytes whose row is being written or removed: what a crash in between leaves can be told apart. */
function pendingFolder(): string {
	return path.join(evidenceFolder(), 'pending');
}

/** Where the masked bytes of that hash lie. */
export function evidencePath(sha256: string): string {
	return path.join(evidenceFolder(), sha256.slice(0, 2), sha256);
}

/** Size of the stored file in bytes; null: there is none. */
export async function findSize(sha256: string): Promise<number | null> {
	try {
		return (await stat(evidencePath(sha256))).size;
	} catch (error) {
		if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return null;
		throw error;
	}
}

/** Waits until a file or folder is on the disk, so that a power cut can't take back what was acknowledged. */
async function flush(target: string): Promise<void> {
	const handle = await open(target, 'r');
	try {
		await handle.sync();
	} finally {
		await handle.close();
	}
}

/** Marks that the row of these bytes is about to come or go. */
export async function markPending(sha256: string): Promise<void> {
	await mkdir(pendingFolder(), { recursive: true, mode: PRIVATE_FOLDER });
	const handle = await open(path.join(pendingFolder(), sha256), 'w', PRIVATE_FILE);
	await handle.close();
}

/** Takes the mark away: file and row agree. */
export async function clearPending(sha256: string): Promise<void> {
	await rm(path.join(pendingFolder(), sha256), { force: true });
}

/** The hashes that a crash left marked. */
export async function listPending(): Promise<string[]> {
	await mkdir(pendingFolder(), { recursive: true, mode: PRIVATE_FOLDER });
	return readdir(pendingFolder());
}

/**
 * Moves masked bytes to their place: flushed first, then renamed, so that under a hash there is either the
 * whole file or none. Answers false, and drops the copy, where the same bytes lie there already.
 */
export async function placeFile(maskedPath: string, sha256: string): Promise<boolean> {
	if ((await findSize(sha256)) !== null) {
		await rm(maskedPath, { force: true });
		return false;
	}
	const place = evidencePath(sha256);
	await mkdir(path.dirname(place), { recursive: true, mode: PRIVATE_FOLDER });
	await markPending(sha256);
	await flush(maskedPath);
	await rename(maskedPath, place);
	await flush(path.dirname(place));
	return true;
}

/** Removes the stored file of that hash. */
export async function removeFile(sha256: string): Promise<void> {
	await rm(evidencePath(sha256), { force: true });
}
