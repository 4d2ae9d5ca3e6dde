import { writeFile } from 'node:fs/promises';
import path from 'node:path';
import { text } from 'node:stream/consumers';
import { describe, expect, it } from 'vitest';
import type { Evidence } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import { config } from '$lib/server/config';
import { select } from '$lib/server/db/query';
import * as evidence from '$lib/server/evidence/evidence-service';
import { evidencePath } from '$lib/server/evidence/evidence-files';
import type { Upload } from '$lib/server/evidence/upload';
import * as incidents from '$lib/server/incidents/incidents-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';
import { listDataFiles, readUploadFixture, spool, spoolFixture } from '../../../fixtures/spool';

withDatabase();

async function attach(actor: Actor, number: number | null, ...uploads: Upload[]): Promise<Evidence[]> {
	const attached = await evidence.attach(actor, number, uploads);
	if (!attached.ok) throw new Error(attached.problem.detail);
	return attached.value;
}

async function read(actor: Actor, number: number) {
	const found = await incidents.read(actor, number);
	if (!found.ok) throw new Error(found.problem.detail);
	return found.value;
}

describe('attach', () => {
	it('refuses a reader, an incident that is none, and a request without files; the spool is empty after', async () => {
		const number = await makeIncident();
		const responder = await makeActor('responder');
		const refusals = [
			await evidence.attach(await makeActor('reader'), number, [await spoolFixture('plan.json')]),
			await evidence.attach(responder, 999, [await spoolFixture('plan.json')]),
			await evidence.attach(responder, number, [])
		];
		expect(refusals.map((outcome) => (outcome.ok ? 'ok' : outcome.problem.code))).toEqual([
			'forbidden',
			'not_found',
			'invalid'
		]);
		expect(await listDataFiles('spool')).toEqual([]);
		expect(await select('SELECT id FROM evidence')).toEqual([]);
	});

	it('keeps nothing where the row cannot be written, and clears the spool', async () => {
		const number = await makeIncident();
		const stranger: Actor = { ...(await makeActor('responder')), personId: 4711 };
		await expect(evidence.attach(stranger, number, [await spoolFixture('plan.json')])).rejects.toThrow();
		expect(await listDataFiles('evidence')).toEqual([]);
		expect(await listDataFiles('spool')).toEqual([]);
		expect(await select('SELECT id FROM entries')).toEqual([]);
	});

	it('leaves a file alone that another incident holds, where the row cannot be written', async () => {
		const actor = await makeActor('responder');
		const [kept] = await attach(actor, await makeIncident(), await spoolFixture('plan.json'));
		const stranger: Actor = { ...actor, personId: 4711 };
		await expect(
			evidence.attach(stranger, await makeIncident(), [await spoolFixture('plan.json')])
		).rejects.toThrow();
		expect(await listDataFiles('evidence')).toEqual([kept?.sha256]);
	});

	it('answers a plan with its reading, kept under the hash of its masked bytes', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const [plan] = await attach(actor, number, await spoolFixture('plan.json'));
		expect(plan).toMatchObject({
			name: 'plan.json',
			kind: 'plan',
			format: 'postgres-json',
			state: 'read',
			addedBy: { id: actor.personId, name: actor.name },
			readings: [{ format: 'postgres-json', engine: 'postgresql', sha256: plan?.sha256 }]
		});
		expect(await listDataFiles('evidence')).toEqual([plan?.sha256]);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('fills what the incident left empty, overwrites nothing, and keeps its revision', async () => {
		const actor = await makeActor('responder');
		const empty = await makeIncident({ engine: null, engineVersion: null, service: null, database: null });
		const told = await makeIncident({ engine: 'mariadb', engineVersion: null, service: 'invoicing' });
		const files = ['plan.json', 'server.log'];
		await attach(actor, empty, ...(await Promise.all(files.map(spoolFixture))));
		await attach(actor, told, ...(await Promise.all(files.map(spoolFixture))));
		const filled = await read(actor, empty);
		expect(filled).toMatchObject({ engine: 'postgresql', revision: 1 });
		expect(filled.symptoms.length).toBeGreaterThan(0);
		expect(await read(actor, told)).toMatchObject({
			engine: 'mariadb',
			engineVersion: null,
			service: 'invoicing'
		});
	});

	it('writes one line of the log and one of the audit for each file', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const name = 'a `b` <script>.json';
		await attach(actor, number, await spool(name, await readUploadFixture('plan.json')));
		const { entries } = await read(actor, number);
		expect(entries).toMatchObject([{ kind: 'evidence', author: { id: actor.personId } }]);
		expect(entries[0]?.text).toContain("`a 'b' <script>.json`");
		expect(await select("SELECT action FROM audit WHERE subject LIKE 'evidence:%'")).toEqual([
			{ action: 'evidence.attach' }
		]);
	});

	it('answers bytes that the incident holds already, and keeps them once', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const [first] = await attach(actor, number, await spoolFixture('plan.json'));
		const again = await attach(actor, number, await spool('copy.json', await readUploadFixture('plan.json')));
		expect(again.map(({ id }) => id)).toEqual([first?.id]);
		const { evidence: held, entries } = await read(actor, number);
		expect([held.length, entries.length]).toEqual([1, 1]);
	});

	it('keeps one file for two incidents', async () => {
		const actor = await makeActor('responder');
		const [one] = await attach(actor, await makeIncident(), await spoolFixture('plan.json'));
		const [other] = await attach(actor, await makeIncident(), await spoolFixture('plan.json'));
		expect(other?.id).not.toBe(one?.id);
		expect(await listDataFiles('evidence')).toEqual([one?.sha256]);
	});

	it('claims evidence that stood alone', async () => {
		const actor = await makeActor('responder');
		const [alone] = await attach(actor, null, await spoolFixture('plan.json'));
		const number = await makeIncident();
		const [claimed] = await attach(actor, number, await spoolFixture('plan.json'));
		expect(claimed?.id).toBe(alone?.id);
		expect((await read(actor, number)).symptoms.length).toBeGreaterThan(0);
	});

	it.each([
		['an empty file', 'plan.json', () => ''],
		['a plan cut in half', 'plan.json', (plan: Buffer) => plan.subarray(0, plan.byteLength / 2)],
		['a picture under the name of a plan', 'plan.json', () => PNG],
		['bytes without sense', 'plan.json', () => Uint8Array.from({ length: 5000 }, (_, i) => (i * 37) % 256)]
	])('keeps %s with a reading that says what it is', async (_what, name, make) => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const content = make(await readUploadFixture('plan.json'));
		const [kept] = await attach(actor, number, await spool(name, content));
		expect(kept).toMatchObject({ state: 'read', name });
		expect(kept?.readings).toHaveLength(1);
		expect(kept?.readings[0]?.warnings[0]?.message).toMatch(/\w{3,}/);
		expect(await listDataFiles('spool')).toEqual([]);
	});

	it('tells a picture by its content', async () => {
		const [kept] = await attach(await makeActor('responder'), null, await spool('plan.json', PNG));
		expect(kept).toMatchObject({ kind: 'picture', format: 'unknown' });
	});

	it('stores no literal of a statement', async () => {
		const actor = await makeActor('responder');
		const log =
			"2026-03-02 02:11:09.120 UTC [77] LOG:  duration: 12.5 ms  statement: SELECT * FROM invoice WHERE iban = 'DE02120300000000202051'\n";
		const [kept] = await attach(actor, null, await spool('server.log', log.repeat(3)));
		const opened = await evidence.open(actor, kept?.sha256 ?? '');
		if (!opened.ok) throw new Error(opened.problem.detail);
		const stored = await text(opened.value.stream);
		expect(stored).toContain('FROM invoice');
		expect(stored).not.toContain('DE02120300000000202051');
	});

	it('says so when the disk refuses, and acknowledges nothing', async () => {
		const actor = await makeActor('responder');
		const upload = await spoolFixture('plan.json');
		// A file where the folder should be: what a full or read-only disk comes to, also for root.
		await writeFile(path.join(config().dataDir, 'evidence'), '');
		await expect(evidence.attach(actor, null, [upload])).rejects.toThrow();
		expect(await select('SELECT id FROM evidence')).toEqual([]);
		expect(await listDataFiles('spool')).toEqual([]);
	});
});

const PNG = Buffer.from(
	'89504e470d0a1a0a0000000d4948445200000001000000010806000000 1f15c4890000000d49444154789c6360606060000000050001a5f645400000000049454e44ae426082'.replaceAll(
		' ',
		''
	),
	'hex'
);

describe('open', () => {
	it('answers not_found for a hash that nobody holds', async () => {
		const opened = await evidence.open(await makeActor('reader'), 'f'.repeat(64));
		expect(opened).toMatchObject({ ok: false, problem: { code: 'not_found' } });
	});

	it.each(['../../catchwater.sqlite', '', '%00', 'spool'])('opens nothing for %j', async (hash) => {
		const opened = await evidence.open(await makeActor('reader'), hash);
		expect(opened).toMatchObject({ ok: false, problem: { code: 'not_found' } });
	});
});

describe('remove', () => {
	it('refuses a responder', async () => {
		const number = await makeIncident();
		const responder = await makeActor('responder');
		const [kept] = await attach(responder, number, await spoolFixture('plan.json'));
		const refused = await evidence.remove(responder, number, kept?.id ?? 0);
		expect(refused).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		expect(await listDataFiles('evidence')).toHaveLength(1);
	});

	it('answers not_found for evidence of another incident', async () => {
		const curator = await makeActor('curator');
		const [kept] = await attach(curator, await makeIncident(), await spoolFixture('plan.json'));
		const refused = await evidence.remove(curator, await makeIncident(), kept?.id ?? 0);
		expect(refused).toMatchObject({ ok: false, problem: { code: 'not_found' } });
	});

	it('takes readings, symptoms and file away, and leaves a line', async () => {
		const curator = await makeActor('curator');
		const number = await makeIncident();
		const [kept] = await attach(curator, number, await spoolFixture('plan.json'));
		expect(await evidence.remove(curator, number, kept?.id ?? 0)).toEqual({ ok: true, value: null });
		const after = await read(curator, number);
		expect(after).toMatchObject({ evidence: [], symptoms: [] });
		expect(after.entries.at(-1)?.text).toBe('Removed the evidence `plan.json`.');
		expect(await listDataFiles('evidence')).toEqual([]);
		expect(await select('SELECT id FROM readings')).toEqual([]);
	});

	it('leaves the file where another incident holds it', async () => {
		const curator = await makeActor('curator');
		const number = await makeIncident();
		const [kept] = await attach(curator, number, await spoolFixture('plan.json'));
		await attach(curator, await makeIncident(), await spoolFixture('plan.json'));
		await evidence.remove(curator, number, kept?.id ?? 0);
		expect(await listDataFiles('evidence')).toEqual([kept?.sha256]);
		expect(evidencePath(kept?.sha256 ?? '')).toContain(`/${kept?.sha256.slice(0, 2)}/`);
	});
});
