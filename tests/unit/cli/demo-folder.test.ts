import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { overrideConfig } from '$lib/server/config';
import { closeDatabase, openDatabase } from '$lib/server/db/connection';
import { select } from '$lib/server/db/query';
import { writeSetting } from '$lib/server/db/setting-store';
import { listDemoSignIns, prepareDemo } from '../../../src/cli/demo-folder';
import { makePerson } from '../../fixtures/factories/person';

let dataDir = '';

beforeEach(async () => {
	dataDir = await mkdtemp(path.join(tmpdir(), 'catchwater-'));
	overrideConfig({ dataDir, logLevel: 'silent' });
});
afterEach(async () => {
	await closeDatabase();
	await rm(dataDir, { recursive: true, force: true });
});

describe('prepareDemo', () => {
	it('refuses a folder that holds files of somebody and touches none', async () => {
		await writeFile(path.join(dataDir, 'thesis.txt'), 'years of work');
		expect(await prepareDemo(dataDir)).toBeNull();
		expect(await readdir(dataDir)).toEqual(['thesis.txt']);
	});

	it("refuses a team's own data folder and leaves its people", async () => {
		await openDatabase(dataDir);
		await makePerson({ name: 'Ada Moss' });
		await closeDatabase();
		expect(await prepareDemo(dataDir)).toBeNull();
		await openDatabase(dataDir);
		expect(await select('SELECT name FROM people')).toEqual([{ name: 'Ada Moss' }]);
	});

	it('takes a folder that carries the marker as it is', async () => {
		await openDatabase(dataDir);
		await writeSetting('demo', { state: 'filled' });
		await makePerson({
			role: 'reader',
			email: 'second@northmoor.example',
			deactivatedAt: '2026-02-01T00:00:00.000Z'
		});
		await makePerson({ role: 'reader', email: 'third@northmoor.example' });
		await closeDatabase();
		expect(await prepareDemo(dataDir)).toBe('reused');
		expect((await listDemoSignIns()).map(({ role, email }) => `${role} ${email}`)).toEqual([
			'reader third@northmoor.example'
		]);
	});

	it('starts over where filling was cut off', async () => {
		await openDatabase(dataDir);
		await writeSetting('demo', { state: 'filling' });
		await makePerson({ name: 'Half Written' });
		await closeDatabase();
		const fill = () => makePerson({ name: 'Whole' });
		expect(await prepareDemo(dataDir, fill)).toBe('filled');
		expect(await select('SELECT name FROM people')).toEqual([{ name: 'Whole' }]);
		await closeDatabase();
		expect(await prepareDemo(dataDir, fill)).toBe('reused');
	});
});
