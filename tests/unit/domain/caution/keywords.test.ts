// Outside source: MariaDB manual, Metadata Locking, and MySQL manual, 10.11.4; the engine with schema locks:
// common practice, no source.
import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';

async function one(engine: 'mariadb' | 'mysql' | 'showplan' | 'unknown', sql: string) {
	const [caution] = await cautionsFor(engine, null, sql);
	if (caution === undefined) throw new Error('no caution');
	return caution;
}

describe('cautionsFor, engines known by first words only', () => {
	it.each([
		['mariadb', 'alter table booking add key (at)'],
		['mysql', 'create index booking_at on booking (at)'],
		['mariadb', 'analyze format=json select * from booking'],
		['mysql', 'explain analyze select 1'],
		['mariadb', 'select sleep(10)'],
		['mariadb', "select * into outfile '/srv/x' from booking"],
		['mariadb', 'select * from booking for update'],
		['mysql', 'select 1 /*! , tidy_up() */'],
		['mysql', 'call tidy_up()'],
		['showplan', 'alter index all on booking rebuild'],
		['showplan', 'exec tidy_up'],
		['unknown', 'select 1']
	] as const)('does not pretend to understand, in %s: %s', async (engine, sql) => {
		expect(await one(engine, sql)).toMatchObject({ understood: false, level: 3 });
	});

	it.each([
		['mariadb', 'select lane, count(*) from booking group by lane', 0],
		['mysql', "-- how much\nshow variables like 'sort_buffer_size'", 0],
		['mariadb', 'set session sort_buffer_size = 33554432', 1],
		['mysql', 'set global sort_buffer_size = 33554432', 2],
		['mariadb', 'analyze table booking', 2],
		['showplan', 'update statistics booking with fullscan', 2],
		['mysql', 'update booking set a = 1', 3],
		['mariadb', 'truncate table booking', 3]
	] as const)('knows the plainest, in %s: %s', async (engine, sql, level) => {
		expect(await one(engine, sql)).toMatchObject({ understood: true, level });
	});

	it('names the exclusive metadata lock by the engine’s own name', async () => {
		expect((await one('mariadb', 'truncate table booking')).lock).toEqual({
			mode: 'MDL_EXCLUSIVE',
			on: 'booking'
		});
		expect((await one('mysql', 'drop table booking')).blocks).toEqual({
			reads: true,
			writes: true,
			schemaChanges: true
		});
	});
});
