import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { incidentFilter } from '$lib/domain/incident/incident-filter';
import { SYSTEM } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import type { Database } from '$lib/server/db/connection';
import { select } from '$lib/server/db/query';
import { fillDemo } from '$lib/server/demo/fill-demo';
import * as incidents from '$lib/server/incidents/incidents-service';
import * as people from '$lib/server/people/people-service';
import { DEMO_PASSWORD } from '$lib/server/people/demo-password';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import { dropDatabase, makeDatabase } from '../../../fixtures/database';

let db: Database;
let logged: number;
const NOW = new Date('2026-12-01T02:00:00.000Z');

beforeAll(async () => {
	db = await makeDatabase();
	logged = await fillDemo(db.dataDir, NOW);
}, 180_000);
afterAll(() => dropDatabase(db));

function valueOf<T>(outcome: Outcome<T>): T {
	if (!outcome.ok) throw new Error(outcome.problem.detail);
	return outcome.value;
}

async function listAll(filter: Record<string, unknown> = {}) {
	return valueOf(await incidents.list(SYSTEM, incidentFilter.parse({ limit: 200, ...filter }))).items;
}

describe('fillDemo', () => {
	it('refuses a folder that holds something', async () => {
		await expect(fillDemo(db.dataDir, NOW)).rejects.toThrow(/Only an empty data folder/);
	});

	it('refuses a folder that is not the one that is open', async () => {
		await expect(fillDemo('/somewhere/else', NOW)).rejects.toThrow(/not the folder that is open/);
	});

	it('logs every incident as the demonstration’s, in the order in which they happened', async () => {
		const all = await listAll({ sort: 'number' });
		expect(all).toHaveLength(logged);
		expect(all.every(({ origin }) => origin === 'demo')).toBe(true);
		const starts = all.map(({ startedAt }) => startedAt ?? '');
		expect(starts).toEqual([...starts].sort());
	});

	it('reads the evidence as any other: every plan recognised, symptoms found', async () => {
		const unread = await select<{ name: string }>(
			"SELECT name FROM evidence WHERE state <> 'read' OR format = 'unknown'"
		);
		expect(unread).toEqual([]);
		const [spilled] = await listAll({ symptom: ['hash-spill'] });
		expect(spilled?.symptoms).toContain('hash-spill');
	});

	it('dates everything by the story: nothing lies in the future, no log line before its incident', async () => {
		const late = await select('SELECT id FROM entries WHERE at > :now', { now: NOW.toISOString() });
		const early = await select(
			'SELECT e.id FROM entries e JOIN incidents i ON i.number = e.incidentNumber WHERE e.at < i.startedAt'
		);
		const evidence = await select(
			'SELECT e.id FROM evidence e JOIN incidents i ON i.number = e.incidentNumber WHERE e.addedAt < i.startedAt OR e.addedAt > :now',
			{ now: NOW.toISOString() }
		);
		expect([late, early, evidence]).toEqual([[], [], []]);
	});

	it('gives runbooks their record, their owners and their reviews', async () => {
		const { items } = valueOf(await runbooks.list(SYSTEM));
		expect(
			items.every(
				({ owner, reviewer, reviewDue }) =>
					owner !== null && reviewer !== null && owner.id !== reviewer.id && reviewDue !== null
			)
		).toBe(true);
		const refresh = items.find(({ slug }) => slug === 'refresh-statistics-of-one-table');
		expect(refresh?.record).toEqual({ worked: 7, partly: 1, noEffect: 1, madeWorse: 0 });
		const memory = items.find(({ slug }) => slug === 'give-one-session-more-memory');
		expect(memory?.record.worked).toBeGreaterThanOrEqual(10);
	});

	it('leaves something to do: open, contained, an attempt under way, one that nobody is on', async () => {
		const open = await listAll({ state: ['open', 'contained'] });
		expect(open.length).toBeGreaterThanOrEqual(3);
		expect(open.some(({ owner }) => owner === null)).toBe(true);
		expect(await select('SELECT id FROM attempts WHERE outcome IS NULL')).toHaveLength(1);
	});

	it('lets everybody in with the printed password', async () => {
		for (const email of ['ilse.marten@northmoor.example', 'davit.oresen@northmoor.example']) {
			const outcome = await people.signIn({ email, password: DEMO_PASSWORD, address: '127.0.0.1' });
			expect(outcome.ok).toBe(true);
		}
	});
});
