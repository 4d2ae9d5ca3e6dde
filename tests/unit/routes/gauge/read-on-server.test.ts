import { readdir } from 'node:fs/promises';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { database } from '$lib/server/db/connection';
import { select } from '$lib/server/db/query';
import { readSide } from '../../../fixtures/compare';
import { withDatabase } from '../../../fixtures/database';
import { request } from '../../../fixtures/request';

withDatabase();

const PLAN = `Sort  (cost=100.00..101.00 rows=600 width=14) (actual time=5.000..6.000 rows=600 loops=1)
  Sort Key: currency
  Sort Method: quicksort  Memory: 37kB
  ->  Seq Scan on invoice_line  (cost=0.00..90.00 rows=600 width=14) (actual time=0.010..4.000 rows=600 loops=1)
Planning Time: 0.100 ms
Execution Time: 6.500 ms
`;

function form(text: string): FormData {
	const body = new FormData();
	body.append('evidence', text);
	body.append('evidence', new File([], ''));
	return body;
}

describe('reading on the server for a browser without JavaScript', () => {
	it('says what to do when nothing was given', async () => {
		const answer = await request('POST', '/gauge', { as: 'reader', body: form('  ') });
		expect(answer.status).toBe(400);
		expect(JSON.stringify(await answer.json())).toContain('paste a plan');
	});

	it('reads what was pasted, and sends it back to be logged', async () => {
		const answer = await request('POST', '/gauge', { as: 'reader', body: form(PLAN) });
		const { data } = await answer.json();
		expect(data.readings).toHaveLength(1);
		expect(data.readings[0]).toMatchObject({ kind: 'plan', format: 'postgres-text' });
		// Forms send line ends as CR LF (HTML Standard, multipart/form-data encoding).
		expect(data.pasted).toBe(PLAN.replaceAll('\n', '\r\n'));
	});

	it('stores nothing, not even in the spool', async () => {
		await request('POST', '/gauge', { as: 'reader', body: form(PLAN) });
		expect(await select('SELECT id FROM evidence')).toEqual([]);
		expect(await readdir(path.join(database().dataDir, 'spool'))).toEqual([]);
	});
});

describe('comparing on the server for a browser without JavaScript', () => {
	const pairForm = (before: string | Buffer, after: string | Buffer): FormData => {
		const body = new FormData();
		for (const [name, text] of [
			['before', before],
			['after', after]
		] as const) {
			body.append(name, String(text));
			body.append(name, new File([], ''));
		}
		return body;
	};
	const PAIR = 'statistics-taken-swap-the-build-side';

	it('says at which field something is missing', async () => {
		const answer = await request('POST', '/gauge?compare', { as: 'reader', body: pairForm(PLAN, ' ') });
		expect(answer.status).toBe(400);
		const { data } = await answer.json();
		expect(Object.keys(data.issues)).toEqual(['after']);
		expect(await readdir(path.join(database().dataDir, 'spool'))).toEqual([]);
	});

	it('compares what was pasted, with the names of what changed, and stores nothing', async () => {
		const body = pairForm(readSide(PAIR, 'before'), readSide(PAIR, 'after'));
		const answer = await request('POST', '/gauge?compare', { as: 'reader', body });
		const { compared } = (await answer.json()).data;
		expect(compared.summary).toMatch(/^Time fell from 666 to 388 ms/);
		expect(compared.changes.map(({ name }: { name: string }) => name)).toContain('hash join on invoice_no');
		expect(await select('SELECT id FROM evidence')).toEqual([]);
		expect(await readdir(path.join(database().dataDir, 'spool'))).toEqual([]);
	});
});

describe('the figures in the address', () => {
	it('become the start of the panel', async () => {
		const answer = await request('GET', '/gauge?kind=sort&rows=1000&width=40&memoryKb=64', { as: 'reader' });
		expect((await answer.json()).asked).toMatchObject({ kind: 'sort', rows: 1000, width: 40, memoryKb: 64 });
	});

	it('count as none when they do not fit', async () => {
		const answer = await request('GET', '/gauge?kind=sort&rows=-1&width=40&memoryKb=64', { as: 'reader' });
		expect((await answer.json()).asked).toBeNull();
	});
});
