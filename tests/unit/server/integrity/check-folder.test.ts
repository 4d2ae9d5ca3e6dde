import { createHash } from 'node:crypto';
import { mkdir, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { database } from '$lib/server/db/connection';
import { migrateDown } from '$lib/server/db/migrate';
import { MIGRATIONS } from '$lib/server/db/migrations/migrations';
import { EvidenceModel } from '$lib/server/db/models/evidence';
import { execute } from '$lib/server/db/query';
import { write } from '$lib/server/db/transaction';
import { evidencePath } from '$lib/server/evidence/evidence-files';
import { checkFolder } from '$lib/server/integrity/check-folder';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';

withDatabase();

/** Puts a file and its row into the data folder; answers where the file lies. */
async function keep(text: string): Promise<{ file: string; sha256: string }> {
	const sha256 = createHash('sha256').update(text).digest('hex');
	const file = evidencePath(sha256);
	await mkdir(path.dirname(file), { recursive: true });
	await writeFile(file, text);
	await write(() =>
		EvidenceModel.create({
			sha256,
			name: 'plan.json',
			bytes: text.length,
			kind: 'plan',
			format: 'postgres-json',
			state: 'read',
			addedAt: '2026-03-02T02:10:00.000Z'
		})
	);
	return { file, sha256 };
}

async function faults(): Promise<string[]> {
	return (await checkFolder(database())).faults;
}

describe('checkFolder', () => {
	it('names evidence whose file is missing', async () => {
		const { file, sha256 } = await keep('a plan');
		await rm(file);
		expect(await faults()).toEqual([expect.stringContaining(`its file ${sha256} is missing`)]);
	});

	it('names a file that was changed', async () => {
		const { file, sha256 } = await keep('a plan');
		await writeFile(file, 'another plan');
		expect(await faults()).toEqual([`evidence file ${sha256} was changed`]);
	});

	it('names a file that belongs to nothing', async () => {
		const { sha256 } = await keep('a plan');
		await execute('DELETE FROM evidence');
		expect(await faults()).toEqual([`evidence file ${sha256} belongs to nothing`]);
	});

	it('names a row that points at nothing', async () => {
		await execute('PRAGMA foreign_keys = OFF');
		await execute("INSERT INTO readings (evidenceId, position, body) VALUES (99, 0, '{}')");
		expect(await faults()).toEqual(['database: row 1 of readings points at nothing in evidence']);
	});

	it('says when the index is behind', async () => {
		await makeIncident();
		expect(await faults()).toEqual([expect.stringContaining('index: 1')]);
	});

	it('says which tables are missing', async () => {
		await migrateDown(database(), MIGRATIONS[0]?.name ?? null);
		const found = await faults();
		expect(found).toHaveLength(MIGRATIONS.length - 1);
		expect(found[0]).toContain('catchwater migrate');
	});

	it('finds nothing in a sound folder and counts what it saw', async () => {
		await keep('a plan');
		await keep('a log');
		expect(await checkFolder(database())).toMatchObject({ faults: [], checked: { files: 2 } });
	});
});
