import { describe, expect, it } from 'vitest';
import type { Entry } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import { select } from '$lib/server/db/query';
import * as entries from '$lib/server/incidents/entries-service';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';
import { makeActor } from '../../../fixtures/factories/person';

withDatabase();

async function note(actor: Actor, number: number, text: string, at?: string): Promise<Entry> {
	const added = await entries.add(actor, number, at === undefined ? { text } : { text, at });
	if (!added.ok) throw new Error(added.problem.detail);
	return added.value;
}

describe('add', () => {
	it('refuses a reader, and an incident that is none', async () => {
		const number = await makeIncident();
		const input = { text: 'Seen.' };
		expect(await entries.add(await makeActor('reader'), number, input)).toMatchObject({
			problem: { code: 'forbidden' }
		});
		expect(await entries.add(await makeActor('responder'), 999, input)).toMatchObject({
			problem: { code: 'not_found' }
		});
		expect(await select('SELECT id FROM entries')).toEqual([]);
	});

	it('answers the note with its author', async () => {
		const actor = await makeActor('responder');
		const entry = await note(actor, await makeIncident(), 'Batch **stopped**.');
		expect(entry).toMatchObject({
			text: 'Batch **stopped**.',
			kind: 'note',
			revision: 1,
			author: { id: actor.personId, name: actor.name }
		});
	});
});

describe('update', () => {
	it('refuses a colleague, and lets a curator', async () => {
		const number = await makeIncident();
		const { id } = await note(await makeActor('responder'), number, 'Batch stopped.');
		const colleague = await entries.update(await makeActor('responder'), number, id, 1, { text: 'Not so.' });
		expect(colleague).toMatchObject({ ok: false, problem: { code: 'forbidden' } });
		const curator = await entries.update(await makeActor('curator'), number, id, 1, { text: 'Not so.' });
		expect(curator).toMatchObject({ ok: true, value: { text: 'Not so.', revision: 2 } });
	});

	it('refuses a stale correction and hands over what stands there', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { id } = await note(actor, number, 'One');
		await entries.update(actor, number, id, 1, { text: 'Two' });
		expect(await entries.update(actor, number, id, 1, { text: 'Three' })).toMatchObject({
			problem: { code: 'stale', current: { text: 'Two', revision: 2 } }
		});
	});

	it('answers not_found for an entry of another incident', async () => {
		const actor = await makeActor('responder');
		const { id } = await note(actor, await makeIncident(), 'One');
		expect(await entries.update(actor, await makeIncident(), id, 1, { text: 'Two' })).toMatchObject({
			problem: { code: 'not_found' }
		});
	});

	it('keeps what it said before', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const { id, at } = await note(actor, number, 'One');
		await entries.update(actor, number, id, 1, { text: 'Two' });
		expect(await select('SELECT revision, text, at, changedById FROM entryRevisions')).toEqual([
			{ revision: 1, text: 'One', at, changedById: actor.personId }
		]);
	});
});

describe('list', () => {
	it('walks the log in order of time, page by page', async () => {
		const actor = await makeActor('responder');
		const number = await makeIncident();
		const at = '2026-03-02T02:20:00.000Z';
		for (const text of ['b', 'c']) await note(actor, number, text, at);
		await note(actor, number, 'a', '2026-03-02T02:10:00.000Z');
		const first = await entries.list(actor, number, { limit: 2 });
		if (!first.ok) throw new Error(first.problem.detail);
		expect(first.value.items.map(({ text }) => text)).toEqual(['a', 'b']);
		const cursor = first.value.next ?? undefined;
		const second = await entries.list(actor, number, { limit: 2, cursor });
		expect(second).toMatchObject({ value: { items: [{ text: 'c' }], next: null, total: 3 } });
	});
});
