import { describe, expect, it } from 'vitest';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import { EntryModel } from '$lib/server/db/models/entry';
import { IncidentModel } from '$lib/server/db/models/incident';
import { RunbookModel } from '$lib/server/db/models/runbook';
import { RunbookRevisionModel } from '$lib/server/db/models/runbook-revision';
import { execute } from '$lib/server/db/query';
import { write } from '$lib/server/db/transaction';
import { incidentChanged, runbookChanged } from '$lib/server/search/indexing';
import * as search from '$lib/server/search/search-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';

withDatabase();

const AT = '2026-03-02T02:10:00.000Z';
const NOBODY = { ...SYSTEM, role: 'nobody' } as unknown as Actor;

async function log(fields: Parameters<typeof makeIncident>[0]): Promise<number> {
	const number = await makeIncident({ title: 'Something', service: null, ...fields });
	await write((transaction) => incidentChanged(number, transaction));
	return number;
}

async function addEntry(number: number, text: string): Promise<number> {
	return write(async (transaction) => {
		const entry = await EntryModel.create({
			incidentNumber: number,
			at: AT,
			text,
			authorId: null,
			kind: 'note',
			revision: 1,
			createdAt: AT,
			updatedAt: AT
		});
		await incidentChanged(number, transaction);
		return entry.id;
	});
}

async function addRunbook(slug: string, title: string, body: string): Promise<void> {
	await write(async (transaction) => {
		const { id } = await RunbookModel.create({
			slug,
			state: 'published',
			revision: 1,
			publishedRevision: 1,
			createdAt: AT,
			updatedAt: AT
		});
		await RunbookRevisionModel.create({
			runbookId: id,
			revision: 1,
			title,
			summary: '',
			body,
			engines: '["postgresql"]',
			symptoms: '["hash-spill"]',
			reviewEveryDays: 180,
			createdAt: AT
		});
		await runbookChanged(slug, transaction);
	});
}

type Options = Omit<Parameters<typeof search.find>[1], 'q'>;

async function find(q: string, options: Options = {}) {
	const found = await search.find(SYSTEM, { q, ...options });
	if (!found.ok) throw new Error(found.problem.detail);
	return found.value;
}

async function idsOf(q: string, options: Options = {}): Promise<string[]> {
	const hits = await find(q, options);
	return hits.filter((hit) => hit.kind !== 'symptom').map((hit) => `${hit.kind} ${hit.id}`);
}

describe('find', () => {
	it('refuses whoever may not read', async () => {
		expect(await search.find(NOBODY, { q: 'hash' })).toMatchObject({
			ok: false,
			problem: { code: 'forbidden' }
		});
	});

	it('finds nothing for an empty line, for signs, and for a word that nobody wrote', async () => {
		await log({ title: 'Berth report spills' });
		for (const q of ['', '  ', '"', '-berth', '"" ***', 'zeppelin']) expect(await find(q), q).toEqual([]);
	});

	it('puts the incident with the number typed first', async () => {
		const first = await log({ title: 'Quiet one' });
		await log({ title: `Report ${first} of ${first} and ${first}` });
		expect((await idsOf(String(first)))[0]).toBe(`incident ${first}`);
		expect((await idsOf(`#${first}`))[0]).toBe(`incident ${first}`);
	});

	it('finds by beginnings, by other forms of a word, with a typo, and by names in parts', async () => {
		const number = await log({
			title: 'Container overview crawls',
			narrative: 'Loops over yard_move, estimates are off.'
		});
		for (const q of ['contai', 'crawling', 'contaner', 'estimating', 'yard_move', 'yard mo', 'move']) {
			expect(await idsOf(q), q).toEqual([`incident ${number}`]);
		}
	});

	it('wants every word, the phrase in its order, and nothing that is excluded', async () => {
		const join = await log({ title: 'One', narrative: 'hash join on disk' });
		const other = await log({ title: 'Two', narrative: 'join of a hash, deadlock' });
		expect(await idsOf('hash join')).toHaveLength(2);
		expect(await idsOf('hash gantry')).toEqual([]);
		expect(await idsOf('"hash join"')).toEqual([`incident ${join}`]);
		expect(await idsOf('hash -deadlock')).toEqual([`incident ${join}`]);
		expect(await idsOf('join "hash deadlock"')).toEqual([`incident ${other}`]);
	});

	it('narrows by filters, and lists the newest by filters alone', async () => {
		const old = await log({
			title: 'Crane A',
			state: 'resolved',
			service: 'Crane desk',
			startedAt: '2026-01-10T00:00:00.000Z'
		});
		const recent = await log({
			title: 'Crane B',
			state: 'open',
			engine: 'mariadb',
			startedAt: '2026-02-20T00:00:00.000Z'
		});
		await execute(
			`INSERT INTO incidentSymptoms(incidentNumber, symptomId, weight) VALUES (:recent, 'sort-spill', 1)`,
			{ recent }
		);
		expect(await idsOf('crane state:open')).toEqual([`incident ${recent}`]);
		expect(await idsOf('crane service:"crane desk"')).toEqual([`incident ${old}`]);
		expect(await idsOf('crane engine:maria')).toEqual([`incident ${recent}`]);
		expect(await idsOf('crane symptom:sort-spill')).toEqual([`incident ${recent}`]);
		expect(await idsOf('crane until:2026-01-10')).toEqual([`incident ${old}`]);
		expect(await idsOf('since:2026-01')).toEqual([`incident ${recent}`, `incident ${old}`]);
	});

	it('finds runbooks and symptoms in the same list, and one kind alone when asked', async () => {
		await addRunbook('more-memory', 'Give one session more memory', 'When the hash spilled.');
		const number = await log({ title: 'The hash spilled' });
		expect(await idsOf('hash spilled')).toEqual(
			expect.arrayContaining([`incident ${number}`, 'runbook more-memory'])
		);
		const hits = await find('hash spill');
		expect(hits.some((hit) => hit.kind === 'symptom' && hit.id === 'hash-spill')).toBe(true);
		expect(await idsOf('spilled', { kind: 'runbook' })).toEqual(['runbook more-memory']);
		expect(await idsOf('spilled symptom:hash-spill engine:postgresql', { kind: 'runbook' })).toEqual([
			'runbook more-memory'
		]);
		expect(await idsOf('spilled state:open', { kind: 'runbook' })).toEqual([]);
	});

	it('shows an entry where its incident is not shown above it', async () => {
		const number = await log({ title: 'Quiet one' });
		const entry = await addEntry(number, 'Vacuumed the lighthouse table');
		expect(await idsOf('lighthouse')).toEqual([`incident ${number}`]);
		const [hit] = await find('lighthouse', { kind: 'entry' });
		expect(hit).toMatchObject({
			kind: 'entry',
			id: String(entry),
			url: `/incidents/${number}#entry-${entry}`
		});
	});

	it('marks what was met in a snippet of plain text', async () => {
		await log({ title: 'One', narrative: 'All of it <script>alert(1)</script> spilled to disk.' });
		const hits = await find('spilling', { kind: 'incident' });
		expect(hits[0]?.snippet).toEqual([
			{ text: 'All of it <script>alert(1)</script> ', mark: false },
			{ text: 'spilled', mark: true },
			{ text: ' to disk.', mark: false }
		]);
	});

	it('forgets an old title and finds the new one right after the edit', async () => {
		const number = await log({ title: 'Pontoon' });
		expect(await idsOf('pontoon')).toEqual([`incident ${number}`]);
		await write(async (transaction) => {
			await IncidentModel.update({ title: 'Gantry' }, { where: { number } });
			await incidentChanged(number, transaction);
		});
		expect(await idsOf('pontoon')).toEqual([]);
		expect(await idsOf('gantr')).toEqual([`incident ${number}`]);
	});

	it('answers scores between 0 and 1 that never rise down the list, and no more than asked for', async () => {
		for (let i = 0; i < 6; i++) await log({ title: `Crane ${i}`, narrative: 'crane '.repeat(i + 1) });
		const hits = await find('crane', { limit: 4 });
		expect(hits).toHaveLength(4);
		const scores = hits.map((hit) => hit.score);
		expect(scores).toEqual([...scores].sort((one, other) => other - one));
		expect(scores.every((score) => score > 0 && score <= 1)).toBe(true);
	});
});
