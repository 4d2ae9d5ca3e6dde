import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readdir } from 'node:fs/promises';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import type { Database } from '../db/connection';
import { listPendingMigrations } from '../db/migrate';
import { select } from '../db/query';
import { evidencePath } from '../evidence/evidence-files';
import { indexState } from '../search/indexing';

/** What a look at the whole data folder found. */
export interface FolderCheck {
	/** A line each; empty: the folder is sound. */
	faults: string[];
	checked: { files: number; documents: number };
}

async function checkDatabase(): Promise<string[]> {
	const rows = await select<{ integrity_check: string }>('PRAGMA integrity_check');
	const damaged = rows.map((row) => row.integrity_check).filter((line) => line !== 'ok');
	const dangling = await select<{ table: string; rowid: number | null; parent: string }>(
		'PRAGMA foreign_key_check'
	);
	return [
		...damaged.map((line) => `database: ${line}`),
		...dangling.map(
			({ table, rowid, parent }) => `database: row ${rowid ?? '?'} of ${table} points at nothing in ${parent}`
		)
	];
}

/** Names in a folder; none where it doesn't exist. */
async function listNames(folder: string): Promise<string[]> {
	try {
		return await readdir(folder);
	} catch (error) {
		if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return [];
		throw error;
	}
}

/** Hashes under which files lie in the data folder. */
async function listStored(dataDir: string): Promise<string[]> {
	const root = path.join(dataDir, 'evidence');
	const folders = (await listNames(root)).filter((name) => /^[0-9a-f]{2}$/.test(name));
	const names = await Promise.all(folders.map((folder) => listNames(path.join(root, folder))));
	return names.flat();
}

async function hashFile(file: string): Promise<string> {
	const hash = createHash('sha256');
	await pipeline(createReadStream(file), hash);
	return hash.digest('hex');
}

async function checkFiles(dataDir: string): Promise<{ faults: string[]; files: number }> {
	const rows = await select<{ id: number; name: string; sha256: string }>(
		"SELECT id, name, sha256 FROM evidence WHERE sha256 <> ''"
	);
	const stored = await listStored(dataDir);
	const present = new Set(stored);
	const known = new Set(rows.map((row) => row.sha256));
	// Marked before its row is written or removed: what a crash left of it, the next start takes away.
	const marked = new Set(await listNames(path.join(dataDir, 'evidence', 'pending')));
	const faults = rows
		.filter((row) => !present.has(row.sha256))
		.map((row) => `evidence ${row.id} (${row.name}): its file ${row.sha256} is missing`);
	for (const sha256 of stored) {
		if (!known.has(sha256)) {
			if (!marked.has(sha256)) faults.push(`evidence file ${sha256} belongs to nothing`);
		}
		// One after the other: a folder may hold gigabytes.
		else if ((await hashFile(evidencePath(sha256))) !== sha256)
			faults.push(`evidence file ${sha256} was changed`);
	}
	return { faults, files: stored.length };
}

async function checkIndex(): Promise<{ faults: string[]; documents: number }> {
	const { documents, behind } = await indexState();
	return {
		faults: behind > 0 ? [`index: ${behind} documents behind; run "catchwater reindex"`] : [],
		documents
	};
}

/**
 * Looks at database, evidence files and index, and changes nothing. A database whose tables are not up to date is
 * told as the only fault.
 */
export async function checkFolder(db: Database): Promise<FolderCheck> {
	const pending = await listPendingMigrations(db);
	if (pending.length > 0) {
		const faults = pending.map((name) => `database: ${name} is not applied; run "catchwater migrate"`);
		return { faults, checked: { files: 0, documents: 0 } };
	}
	const database = await checkDatabase();
	const files = await checkFiles(db.dataDir);
	const index = await checkIndex();
	return {
		faults: [...database, ...files.faults, ...index.faults],
		checked: { files: files.files, documents: index.documents }
	};
}
