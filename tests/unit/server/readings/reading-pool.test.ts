import { mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import * as readingPool from '$lib/server/readings/reading-pool';
import * as readings from '$lib/server/readings/readings-service';
import type { Actor } from '$lib/domain/person/person';

const PLAN = "Seq Scan on crate  (cost=0.00..1.00 rows=1 width=4)\n  Filter: (state = 'open'::text)\n";
let folder: string;

beforeEach(async () => {
	folder = await mkdtemp(path.join(tmpdir(), 'readings-'));
	await writeFile(path.join(folder, 'raw'), PLAN);
});
afterEach(() => rm(folder, { recursive: true, force: true }));

describe('readFile', () => {
	test('refuses to write over a file that is there', async () => {
		const masked = path.join(folder, 'masked');
		await writeFile(masked, 'kept');
		await expect(readingPool.readFile(path.join(folder, 'raw'), 'plan', masked)).rejects.toThrow('EEXIST');
		expect(await readFile(masked, 'utf8')).toBe('kept');
	});

	test('rejects where there is no file', async () => {
		await expect(readingPool.readFile(path.join(folder, 'nothing'), 'plan', null)).rejects.toMatchObject({
			code: 'ENOENT'
		});
	});

	test('writes the masked bytes for nobody else to read, and counts and hashes those', async () => {
		const masked = path.join(folder, 'masked');
		const read = await readingPool.readFile(path.join(folder, 'raw'), 'plan', masked);
		const bytes = await readFile(masked);
		expect(bytes.toString()).toBe(PLAN.replace("'open'", '?'));
		expect((await stat(masked)).mode & 0o777).toBe(0o600);
		expect(read.bytes).toBe(bytes.length);
		expect(read.readings).toMatchObject([{ name: 'plan', format: 'postgres-text', sha256: read.sha256 }]);
	});

	test('leaves no half masked file behind when reading fails', async () => {
		const masked = path.join(folder, 'masked');
		await expect(readingPool.readFile(folder, 'plan', masked)).rejects.toThrow();
		await expect(stat(masked)).rejects.toMatchObject({ code: 'ENOENT' });
	});
});

describe('read', () => {
	const reader: Actor = { personId: 1, name: 'Ada', role: 'reader', via: 'session', tokenId: null };

	test('gives the readings of all files in their order', async () => {
		await writeFile(path.join(folder, 'other'), '');
		const files = ['raw', 'other'].map((name) => ({ path: path.join(folder, name), name }));
		const outcome = await readings.read(reader, files);
		expect(outcome).toMatchObject({
			ok: true,
			value: [
				{ name: 'raw', format: 'postgres-text' },
				{ name: 'other', format: 'unknown' }
			]
		});
	});
});
