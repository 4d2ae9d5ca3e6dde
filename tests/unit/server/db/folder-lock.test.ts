import { spawn } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, expect, describe, it } from 'vitest';
import { lockFolder } from '$lib/server/db/folder-lock';

let folder = '';

beforeEach(async () => {
	folder = await mkdtemp(path.join(tmpdir(), 'catchwater-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

/** A process of its own that holds the folder until it is killed. */
function holdElsewhere(): Promise<{ kill: () => Promise<void> }> {
	const script = `
		const sqlite3 = require('sqlite3');
		const file = new sqlite3.Database(process.argv[1], () => {
			file.exec('BEGIN EXCLUSIVE', () => console.log('held'));
		});
		setInterval(() => file, 1000);`;
	const child = spawn(process.execPath, ['-e', script, path.join(folder, 'server.lock')]);
	return new Promise((resolve) => {
		child.stdout.once('data', () =>
			resolve({
				kill: () =>
					new Promise((gone) => {
						child.once('exit', () => gone());
						child.kill('SIGKILL');
					})
			})
		);
	});
}

describe('lockFolder', () => {
	it('answers null while another process holds the folder, and takes it once that one was killed', async () => {
		const other = await holdElsewhere();
		expect(await lockFolder(folder)).toBeNull();
		await other.kill();
		const lock = await lockFolder(folder);
		expect(lock).not.toBeNull();
		await lock?.release();
	});
});
