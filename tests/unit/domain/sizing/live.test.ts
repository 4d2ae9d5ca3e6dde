import { PGlite } from '@electric-sql/pglite';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { readPostgresJson } from '$lib/domain/reading/formats/postgres-json';
import type { OperatorSizing } from '$lib/domain/reading/reading';
import { toPlanTree } from '$lib/domain/symptom/plan-tree';
import { sizeOperators } from '$lib/domain/symptom/size-operators';

/** The outside source is the engine itself: PostgreSQL 18 compiled to WebAssembly, a 32-bit layout. */
const POINTER_BYTES = 4;

const TABLES = `
CREATE TABLE container (container_id int, owner int, code text, note text);
INSERT INTO container SELECT n, n % 900, 'CNU' || lpad(n::text, 8, '0'), repeat('x', 20 + (n * 7919) % 17) FROM generate_series(1, 40000) n;
CREATE TABLE yard_move (move_id int, container_id int, hours int, tag text);
INSERT INTO yard_move SELECT n, (n * 7919) % 40000 + 1, n % 97, 'tag-' || (n * 10007) % 30000 FROM generate_series(1, 60000) n;
ANALYZE;
SET enable_mergejoin = off; SET enable_nestloop = off; SET max_parallel_workers_per_gather = 0; SET jit = off;`;

interface Case {
	name: string;
	sql: string;
	/** A work_mem at which it spills. */
	smallKb: number;
	/** Groups are to be hashed, not sorted. */
	hashGroups?: boolean;
}

const CASES: Case[] = [
	{
		name: 'a hash of narrow rows',
		smallKb: 128,
		sql: 'SELECT count(*) FROM yard_move JOIN container USING (container_id)'
	},
	{
		name: 'a hash of wider rows',
		smallKb: 256,
		sql: 'SELECT count(*), max(code) FROM yard_move JOIN container USING (container_id)'
	},
	{
		name: 'a hash whose rows were underestimated',
		smallKb: 256,
		sql: 'SELECT count(*), max(c.note) FROM yard_move m JOIN container c USING (container_id) WHERE (c.owner + 0) % 10 < 8'
	},
	{ name: 'a sort of whole rows', smallKb: 512, sql: 'SELECT * FROM container ORDER BY note, container_id' },
	{
		name: 'a sort of one integer column',
		smallKb: 256,
		sql: 'SELECT container_id FROM container ORDER BY container_id DESC'
	},
	{ name: 'a sort of one text column', smallKb: 512, sql: 'SELECT tag FROM yard_move ORDER BY tag' },
	{ name: 'a sort of two columns', smallKb: 1024, sql: 'SELECT move_id, tag FROM yard_move ORDER BY tag' },
	{
		name: 'a sort under a deep offset',
		smallKb: 512,
		sql: 'SELECT * FROM yard_move ORDER BY tag, move_id LIMIT 100 OFFSET 25000'
	},
	{
		name: 'a sort under a deeper offset',
		smallKb: 512,
		sql: 'SELECT * FROM yard_move ORDER BY tag, move_id LIMIT 100 OFFSET 40000'
	},
	{
		name: 'groups that are counted',
		smallKb: 256,
		hashGroups: true,
		sql: 'SELECT container_id, count(*) FROM yard_move GROUP BY container_id'
	},
	{
		name: 'groups with two aggregates',
		smallKb: 512,
		hashGroups: true,
		sql: 'SELECT tag, count(*), max(hours) FROM yard_move GROUP BY tag'
	},
	{
		name: 'groups without an aggregate',
		smallKb: 256,
		hashGroups: true,
		sql: 'SELECT DISTINCT tag FROM yard_move'
	}
];

let database: PGlite;

beforeAll(async () => {
	database = new PGlite();
	await database.exec(TABLES);
}, 120_000);

afterAll(() => database.close());

/** Runs the statement at a work_mem and says what of it spilled, and in which shape it ran. */
async function run(
	{ sql, hashGroups }: Case,
	workMemKb: number
): Promise<{ sizing: OperatorSizing[]; shape: string }> {
	await database.exec(
		`SET enable_sort = ${hashGroups === true ? 'off' : 'on'}; SET work_mem = '${workMemKb}kB'`
	);
	const { rows } = await database.query<Record<string, unknown>>(
		`EXPLAIN (ANALYZE, BUFFERS, SETTINGS, FORMAT JSON) ${sql}`
	);
	const [plan] = readPostgresJson(JSON.stringify(Object.values(rows[0] ?? {})[0])).plans;
	if (plan === undefined) throw new Error('PostgreSQL gave no plan.');
	const tree = toPlanTree(plan.root);
	return {
		sizing: sizeOperators(plan, tree, POINTER_BYTES),
		shape: tree.operators.map(({ name }) => name).join(' > ')
	};
}

describe('the setting recommended for a running PostgreSQL 18', () => {
	test.each(CASES)('keeps $name in memory, and 30 % less does not', { timeout: 60_000 }, async (each) => {
		const small = await run(each, each.smallKb);
		const settingKb = small.sizing[0]?.setting.valueKb ?? 0;
		expect(settingKb).toBeGreaterThan(each.smallKb);
		const enough = await run(each, settingKb);
		const less = await run(each, Math.floor(settingKb * 0.7));
		expect(enough.sizing).toEqual([]);
		expect(less.sizing).not.toEqual([]);
		expect([enough.shape, less.shape]).toEqual([small.shape, small.shape]);
	});
});
