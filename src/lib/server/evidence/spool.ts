import { randomBytes } from 'node:crypto';
import { mkdir, readdir, rm } from 'node:fs/promises';
import path from 'node:path';
import { config } from '../config';

/** Nobody but the server's own account may look into the spool: its bytes are not masked yet. */
export const PRIVATE_FILE = 0o600;
const PRIVATE_FOLDER = 0o700;

function spoolFolder(): string {
	return path.join(config().dataDir, 'spool');
}

/** A path in the spool that no file has yet; makes the folder where it is missing. */
export async function makeSpoolPath(suffix: 'raw' | 'masked'): Promise<string> {
	await mkdir(spoolFolder(), { recursive: true, mode: PRIVATE_FOLDER });
	return path.join(spoolFolder(), `${randomBytes(16).toString('hex')}.${suffix}`);
}

/** Where the raw bytes of a piece of evidence wait whose reading outlasts the request. */
export function waitingPath(evidenceId: number): string {
	return path.join(spoolFolder(), `evidence-${evidenceId}.raw`);
}

/** Removes files of the spool; one that is gone already is as good. */
export async function removeFromSpool(paths: readonly string[]): Promise<void> {
	await Promise.all(paths.map((file) => rm(file, { force: true })));
}

/** Removes everything from the spool but the named files. Answers how many files went. */
export async function emptySpool(keep: ReadonlySet<string>): Promise<number> {
	await mkdir(spoolFolder(), { recursive: true, mode: PRIVATE_FOLDER });
	const files = (await readdir(spoolFolder())).map((name) => path.join(spoolFolder(), name));
	const leftover = files.filter((file) => !keep.has(file));
	await removeFromSpool(leftover);
	return leftover.length;
}

const STORAGE_FAULTS = new Set(['ENOSPC', 'EDQUOT', 'EROFS', 'EACCES', 'EPERM', 'EIO', 'EMFILE', 'ENFILE']);

/** Whether the disk refused, rather than the client: nothing that sending again would mend. */
export function isStorageFault(error: unknown): boolean {
	return (
		error instanceof Error &&
		'code' in error &&
		typeof error.code === 'string' &&
		STORAGE_FAULTS.has(error.code)
	);
}
