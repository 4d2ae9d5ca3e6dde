import { mkdirSync } from 'node:fs';
import path from 'node:path';
import sqlite3 from 'sqlite3';

const FILE = 'server.lock';

/** Connections that hold a folder: nothing else refers to them, and a collected connection lets go. */
const held = new Set<sqlite3.Database>();

/** A data folder held by this process. */
export interface FolderLock {
	release: () => Promise<void>;
}

/**
 * Holds a data folder for one server. A second one would serve from an index in memory that doesn't know of
 * the first one's writes. Answers null where another process holds it. The lock is an open transaction on a file
 * of its own: the operating system lets go of it however the process ends, so none is ever left behind.
 */
export function lockFolder(dataDir: string): Promise<FolderLock | null> {
	mkdirSync(dataDir, { recursive: true, mode: 0o700 });
	return new Promise((resolve, reject) => {
		const file = new sqlite3.Database(path.join(dataDir, FILE), (openFailure) => {
			if (openFailure) {
				reject(openFailure);
				return;
			}
			file.exec('BEGIN EXCLUSIVE', (failure: (Error & { code?: string }) | null) => {
				if (!failure) {
					held.add(file);
					resolve({ release: () => close(file) });
				} else if (failure.code === 'SQLITE_BUSY') close(file).then(() => resolve(null), reject);
				else reject(failure);
			});
		});
	});
}

function close(file: sqlite3.Database): Promise<void> {
	held.delete(file);
	return new Promise((resolve, reject) => {
		file.close((failure) => (failure ? reject(failure) : resolve()));
	});
}
