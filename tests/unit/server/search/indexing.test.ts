import { describe, expect, it } from 'vitest';
import { catchUp, incidentChanged, indexState, reindexAll } from '$lib/server/search/indexing';
import { EntryModel } from '$lib/server/db/models/entry';
import { IncidentModel } from '$lib/server/db/models/incident';
import { execute, select, selectOne } from '$lib/server/db/query';
import { write } from '$lib/server/db/transaction';
import { withDatabase } from '../../../fixtures/database';
import { makeIncident } from '../../../fixtures/factories/incident';

withDatabase();

const AT = '2026-03-02T02:10:00.000Z';

async function numbersWith(expression: string): Promise<number[]> {
	const rows = await select<{ number: number }>(
		'SELECT rowid AS number FROM incidentText WHERE incidentText MATCH :expression ORDER BY rowid',
		{ expression }
	);
	return rows.map((row) => row.number);
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

describe('incidentChanged', () => {
	it('leaves nothing in the index of a transaction that fails', async () => {
		const number = await makeIncident({ title: 'Crane report spills' });
		const failing = write(async (transaction) => {
			await incidentChanged(number, transaction);
			throw new Error('on purpose');
		});
		await expect(failing).rejects.toThrow('on purpose');
		expect(await numbersWith('"crane"')).toEqual([]);
	});

	it('passes over a number that nobody has', async () => {
		await write((transaction) => incidentChanged(99, transaction));
		expect(await indexState()).toEqual({ documents: 0, behind: 0 });
	});

	it('makes words, stems, and names whole and in parts findable at once', async () => {
		const number = await makeIncident({ narrative: 'The hashes on yard_move.moved_at spilled.' });
		await write((transaction) => incidentChanged(number, transaction));
		for (const expression of ['"hash"', '"spill"', '"yard_move"', '"yard" + "mov"', '"yard_move.moved_at"']) {
			expect(await numbersWith(expression), expression).toEqual([number]);
		}
	});

	it('finds new words and forgets the old ones after an edit', async () => {
		const number = await makeIncident({ narrative: 'pontoon' });
		await write((transaction) => incidentChanged(number, transaction));
		await write(async (transaction) => {
			await IncidentModel.update({ narrative: 'gantry' }, { where: { number } });
			await incidentChanged(number, transaction);
		});
		expect(await numbersWith('"pontoon"')).toEqual([]);
		expect(await numbersWith('"gantry"')).toEqual([number]);
	});

	it('finds an entry by its words, and by the new ones once it is edited', async () => {
		const number = await makeIncident();
		const id = await addEntry(number, 'Raised the lighthouse setting');
		await addEntry(number, 'Second look');
		await write(async (transaction) => {
			await EntryModel.update({ text: 'Raised the beacon setting', revision: 2 }, { where: { id } });
			await incidentChanged(number, transaction);
		});
		const found = await select<{ rowid: number }>(
			`SELECT rowid FROM entryText WHERE entryText MATCH '"beacon"'`
		);
		const lost = await select<{ rowid: number }>(
			`SELECT rowid FROM entryText WHERE entryText MATCH '"lighthouse"'`
		);
		expect(found).toEqual([{ rowid: id }]);
		expect(lost).toEqual([]);
	});
});

describe('indexState', () => {
	it('counts incidents that are not indexed yet as behind, until they were caught up on', async () => {
		const number = await makeIncident();
		await makeIncident();
		await write((transaction) => incidentChanged(number, transaction));
		expect(await indexState()).toEqual({ documents: 1, behind: 1 });
		expect(await catchUp()).toBe(1);
		expect(await indexState()).toEqual({ documents: 2, behind: 0 });
	});

	it('counts an incident indexed in an older way as behind', async () => {
		const number = await makeIncident();
		await write((transaction) => incidentChanged(number, transaction));
		await execute('UPDATE precedentProfiles SET analysis = 0');
		expect(await indexState()).toEqual({ documents: 0, behind: 1 });
	});
});

describe('reindexAll', () => {
	it('builds more incidents than one batch holds, each once', async () => {
		for (let i = 0; i < 30; i++) await makeIncident({ title: `Mooring ${i}` });
		const steps: number[] = [];
		expect(await reindexAll((done) => steps.push(done))).toBe(30);
		expect(steps).toEqual([25, 30]);
		expect((await numbersWith('"moor"')).length).toBe(30);
		expect(await reindexAll()).toBe(30);
		const row = await selectOne<{ n: number }>('SELECT count(*) AS n FROM incidentText');
		expect(row?.n).toBe(30);
	});
});
