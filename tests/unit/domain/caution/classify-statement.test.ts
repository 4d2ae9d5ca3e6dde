// Outside sources: facts are those of the PostgreSQL manual's pages on each command and 13.3 Explicit Locking;
// the locks themselves are checked against a running server in postgresql-locks.test.ts.
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { POSTGRES_RULES } from '$lib/domain/caution/engines/postgresql';

async function one(sql: string, version: string | null = '15.18') {
	const cautions = await cautionsFor('postgresql', version, sql);
	expect(cautions).toHaveLength(1);
	const [caution] = cautions;
	if (caution === undefined) throw new Error('no caution');
	return caution;
}

describe('cautionsFor, what is not understood', () => {
	it.each([
		['no SQL at all', 'please make it fast'],
		['half a statement', 'select * from'],
		['a psql command', '\\d booking'],
		['a block of code', 'do $$ begin delete from booking; end $$'],
		['a procedure', 'call tidy_up()'],
		['a prepared statement whose text is elsewhere', 'execute moves_of(1)'],
		['EXPLAIN ANALYZE of one', 'explain analyze execute moves_of(1)'],
		['a function that is not known to read only', 'select tidy_up(id) from booking'],
		['the same in another schema under a known name', 'select ops.count(1)'],
		['an advisory lock', 'select pg_advisory_lock(1)'],
		['a file written on the server', "copy booking to '/srv/x'"],
		['a program on the server', "copy booking from program 'true'"],
		['a function definition', 'create function f() returns int language sql as $$ select 1 $$'],
		['ALTER of an index', 'alter index booking_at set (fastupdate = off)']
	])('says so of %s, at the highest level, with a sentence', async (_what, sql) => {
		const caution = await one(sql);
		expect(caution).toMatchObject({ understood: false, kind: 'not-understood', level: 3, basis: null, sql });
		expect(caution.load).toMatch(/^Not understood: .+\./);
	});

	it('never throws, whatever it is given', async () => {
		await fc.assert(
			fc.asyncProperty(fc.string({ unit: 'binary' }), async (text) => {
				for (const caution of await cautionsFor('postgresql', null, text))
					expect(caution.level).toBeGreaterThan(-1);
			}),
			{ numRuns: 300 }
		);
	});

	it.each([
		['a tree of 200,000 additions', `select ${'1+'.repeat(200_000)}1`],
		['100,000 brackets', `select ${'('.repeat(100_000)}`],
		// PostgreSQL's scan.l reads such a run again from each of its signs: minutes for these.
		['50,000 comments that begin one in the other', '/*'.repeat(50_000)],
		['100,000 operator signs in a row', `select 1 ${'+'.repeat(100_000)} 1`],
		['a zero byte before more', 'select 1\0; drop table booking']
	])('survives %s', async (_what, sql) => {
		const [caution] = await cautionsFor('postgresql', null, sql);
		expect(caution?.kind).toBe('not-understood');
	});

	it('puts the placeholders back into each of 2,000 statements', async () => {
		const sql = Array.from({ length: 2000 }, (_, n) => `drop table {{tü${n}}};`).join(' ');
		const cautions = await cautionsFor('postgresql', null, sql);
		expect(cautions.map((caution) => caution.sql)).toEqual(
			Array.from({ length: 2000 }, (_, n) => `drop table {{tü${n}}}`)
		);
		expect(cautions[1999]?.lock?.on).toContain('{{tü1999}}');
	});

	it('keeps what it understands of a script of which one statement does not parse', async () => {
		const cautions = await cautionsFor('postgresql', null, 'analyze booking; vacuum vacuum vacuum; select 1');
		expect(cautions.map(({ kind }) => kind)).toEqual(['analyze', 'not-understood', 'select']);
	});
});

describe('cautionsFor', () => {
	it('answers nothing for nothing', async () => {
		expect(await cautionsFor('postgresql', null, ' -- later\n;')).toEqual([]);
	});

	it('gives one caution a statement, each with its own text', async () => {
		const cautions = await cautionsFor(
			'postgresql',
			null,
			"begin;\nset local work_mem = '48MB';\nselect 'ä;ö';\ncommit;"
		);
		expect(cautions.map(({ sql }) => sql)).toEqual([
			'begin',
			"set local work_mem = '48MB'",
			"select 'ä;ö'",
			'commit'
		]);
		expect(cautions.map(({ level }) => level)).toEqual([1, 1, 0, 1]);
	});

	it.each([
		[0, 'select count(*) from booking where at > now() - interval $$1 day$$'],
		[0, 'show work_mem'],
		[0, 'explain delete from booking'],
		[0, "select pg_size_pretty(pg_table_size('booking'))"],
		[1, "set work_mem = '64MB'"],
		[1, 'reset all'],
		[2, 'analyze booking'],
		[2, 'vacuum booking'],
		[2, 'create index concurrently i on booking (at)'],
		[2, 'create statistics s on a, b from booking'],
		[2, "alter role report_ro set work_mem = '12MB'"],
		[2, "alter system set work_mem = '8MB'"],
		[2, 'select pg_reload_conf()'],
		[2, 'select pg_cancel_backend(1)'],
		[3, 'select pg_terminate_backend(pid) from pg_stat_activity'],
		[3, 'create index i on booking (at)'],
		[3, 'vacuum (full) booking'],
		[3, 'truncate booking'],
		[3, "prepare transaction 'b1'"],
		[3, "rollback prepared 'b1'"],
		[3, 'drop table booking'],
		[3, 'delete from booking'],
		[3, 'update booking set at = null where id = 1'],
		[3, 'explain (analyze, buffers) delete from booking'],
		[3, 'select pg_stat_reset()']
	])('gives level %i to: %s', async (level, sql) => {
		expect((await one(sql)).level).toBe(level);
	});

	it('never gives less than 3 to a row that keeps readers or writers waiting', async () => {
		for (const sql of ['lock table booking in share mode', 'refresh materialized view concurrently totals']) {
			const caution = await one(sql);
			expect(caution.blocks.writes).toBe(true);
			expect(caution.level).toBe(3);
		}
	});

	it('tells a statement with a condition from one without', async () => {
		expect((await one('delete from booking')).kind).toBe('delete-all');
		expect((await one('delete from booking where id = 1')).kind).toBe('delete');
		expect((await one('update booking set a = 1')).load).toContain('every row is locked');
	});

	it('says what a cancelled concurrent build leaves behind and how it is undone', async () => {
		const caution = await one('create index concurrently booking_at_2 on yard.booking (at)');
		expect(caution.cancel).toContain('invalid index');
		expect(caution.undo).toBe('DROP INDEX CONCURRENTLY booking_at_2;');
		expect(caution.lock).toEqual({ mode: 'ShareUpdateExclusiveLock', on: 'yard.booking' });
		expect(caution.blocks).toEqual({ reads: false, writes: false, schemaChanges: true });
		expect(caution.basis).toEqual({
			source: 'PostgreSQL manual',
			section: 'SQL commands, CREATE INDEX (Building Indexes Concurrently)'
		});
	});

	it('takes the strongest of several forms of one ALTER TABLE, and undoes all', async () => {
		const caution = await one('alter table booking alter column a set statistics 500, add column b int');
		expect(caution.kind).toBe('alter-table-add-column');
		expect(caution.locks).toEqual([{ mode: 'AccessExclusiveLock', on: 'booking' }]);
		expect(caution.undo).toContain('DROP COLUMN b');
		expect(caution.undo).toContain('SET STATISTICS -1');
	});

	it('calls EXPLAIN ANALYZE of a writing statement what it is', async () => {
		const caution = await one('explain analyze update booking set a = 1 where id = 2');
		expect(caution.kind).toBe('explain-analyze');
		expect(caution.load).toContain('between BEGIN and ROLLBACK');
	});

	it('looks into common table expressions for what writes', async () => {
		const caution = await one('with gone as (delete from booking returning id) select count(*) from gone');
		expect(caution.kind).toBe('delete-all');
		expect(caution.locks).toEqual([{ mode: 'RowExclusiveLock', on: 'booking' }]);
	});

	it('knows that a constant default rewrote the table before version 11 (ALTER TABLE, Notes)', async () => {
		const sql = 'alter table booking add column weight int default 5';
		expect((await one(sql, '10.23')).rewrites).toBe(true);
		expect((await one(sql, '11.0')).rewrites).toBe(false);
		expect((await one(sql, null)).rewrites).toBe(false);
	});

	it('reads placeholders as names and shows them as written', async () => {
		const caution = await one('create index concurrently {{index}} on {{table}} ({{columns}})');
		expect(caution.sql).toBe('create index concurrently {{index}} on {{table}} ({{columns}})');
		expect(caution.lock?.on).toBe('{{table}}');
		expect(caution.undo).toBe('DROP INDEX CONCURRENTLY {{index}};');
		expect(caution.precheck.join(' ')).not.toContain('__');
	});

	it('names every table that a bare ANALYZE visits', async () => {
		expect((await one('analyze')).lock?.on).toBe('every table of the database');
	});
});

describe('POSTGRES_RULES', () => {
	it.each(Object.entries(POSTGRES_RULES))(
		'says undo, cancelling, load and the section of the manual: %s',
		(_kind, rule) => {
			for (const text of [rule.undo, rule.cancel, rule.load, rule.section])
				expect(text.length).toBeGreaterThan(4);
		}
	);
});
