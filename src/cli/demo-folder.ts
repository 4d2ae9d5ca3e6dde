import { readdir, rm } from 'node:fs/promises';
import path from 'node:path';
import { z } from 'zod';
import { ROLES, SYSTEM, type Role } from '$lib/domain/person/person';
import { closeDatabase, DATABASE_FILE, openDatabase } from '$lib/server/db/connection';
import { readSetting, writeSetting } from '$lib/server/db/setting-store';
import { fillDemo } from '$lib/server/demo/fill-demo';
import { DEMO_PASSWORD } from '$lib/server/people/demo-password';
import * as people from '$lib/server/people/people-service';

const MARKER = 'demo';
const marker = z.object({ state: z.enum(['filling', 'filled']) });

/** A sign-in of the demonstration, for printing. */
export interface DemoSignIn {
	role: Role;
	email: string;
	password: string;
}

/** Puts the demonstration into the open, empty database. */
type Fill = (dataDir: string) => Promise<unknown>;

async function listFiles(folder: string): Promise<string[]> {
	try {
		// The lock of the program that is filling it.
		return (await readdir(folder)).filter((name) => !name.startsWith('server.lock'));
	} catch (error) {
		if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return [];
		throw error;
	}
}

/** Whether a folder holds anything without being a Catchwater's. */
export async function isForeign(dataDir: string): Promise<boolean> {
	const files = await listFiles(dataDir);
	return files.length > 0 && !files.includes(DATABASE_FILE);
}

/** How far the demonstration in an open folder is; null: it isn't one. */
async function readMarker(): Promise<'filling' | 'filled' | null> {
	const parsed = marker.safeParse(await readSetting(MARKER));
	return parsed.success ? parsed.data.state : null;
}

async function fillOpen(dataDir: string, fill: Fill): Promise<void> {
	await openDatabase(dataDir);
	await writeSetting(MARKER, { state: 'filling' });
	await fill(dataDir);
	await writeSetting(MARKER, { state: 'filled' });
}

/**
 * Leaves an open database with the demonstration in it: fills an empty folder, takes one that carries the
 * marker as it is, and starts over where filling was cut off. Answers null, with nothing open and nothing
 * touched, for a folder that holds anything else.
 */
export async function prepareDemo(
	dataDir: string,
	fill: Fill = fillDemo
): Promise<'filled' | 'reused' | null> {
	if (await isForeign(dataDir)) return null;
	const files = await listFiles(dataDir);
	if (files.length > 0) {
		await openDatabase(dataDir, { migrate: false });
		const state = await readMarker();
		if (state === 'filled') {
			await openDatabase(dataDir);
			return 'reused';
		}
		await closeDatabase();
		if (state === null) return null;
		// Cut off while filling: nothing of anybody's own can be in it yet.
		for (const name of files) await rm(path.join(dataDir, name), { recursive: true, force: true });
	}
	await fillOpen(dataDir, fill);
	return 'filled';
}

/** A sign-in for each role, the first of its people. */
export async function listDemoSignIns(): Promise<DemoSignIn[]> {
	const everybody = await people.list(SYSTEM);
	if (!everybody.ok) return [];
	const active = everybody.value.filter((person) => person.deactivatedAt === null);
	active.sort((a, b) => a.id - b.id);
	return ROLES.flatMap((role) => {
		const first = active.find((person) => person.role === role);
		return first ? [{ role, email: first.email, password: DEMO_PASSWORD }] : [];
	});
}
