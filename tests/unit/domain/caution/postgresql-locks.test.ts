// Outside source: a running PostgreSQL 18 (in WebAssembly). What the lock table predicts is compared with what
// pg_locks shows for the relation inside a transaction that is rolled back.
import { PGlite } from '@electric-sql/pglite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';

const SETUP = `
	create table customer (id int primary key, name text);
	create table booking (id int, customer_id int, note text, at timestamptz, amount numeric, constraint amount_sane check (amount > -1000000) not valid);
	create table archive (id int primary key, note text);
	insert into customer select g, 'c' || g from generate_series(1, 50) g;
	insert into booking select g, 1 + g % 50, 'n', now(), g from generate_series(1, 500) g;
	insert into archive select g, 'a' from generate_series(1, 20) g;
	create index booking_at on booking (at);
	create unique index booking_id on booking (id);
	alter table booking alter column id set not null;
	create table sailing (id int, month int) partition by list (month);
	create table sailing_1 partition of sailing for values in (1);
	create table sailing_2 (id int, month int);
	create statistics booking_known on customer_id, amount from booking;
	create materialized view totals as select customer_id, count(*) as total from booking group by 1;
	create unique index totals_key on totals (customer_id);
	create view recent as select id from customer;
	create function note_change() returns trigger language plpgsql as $$ begin return new; end $$;
	alter table customer add constraint customer_name check (name is not null);
`;

/** Forms that may run in a transaction block: statement, relations to look at. */
const FORMS: [sql: string, relations: string[]][] = [
	['select * from booking', ['booking']],
	['select b.id from booking b join customer c on c.id = b.customer_id', ['booking', 'customer']],
	['select id from booking for update', ['booking']],
	['select id from booking for share', ['booking']],
	['explain select * from booking', ['booking']],
	['explain update booking set amount = 0 where id = 1', ['booking']],
	['explain analyze select * from booking', ['booking']],
	['explain (analyze) update booking set amount = 0 where id = 1', ['booking']],
	['insert into archive (id, note) select id + 1000, note from booking', ['archive', 'booking']],
	['update booking set amount = amount + 1', ['booking']],
	['update booking b set note = c.name from customer c where c.id = b.customer_id', ['booking', 'customer']],
	['delete from booking where id < 10', ['booking']],
	['with gone as (delete from booking where id < 3 returning id) select count(*) from gone', ['booking']],
	[
		'merge into archive a using booking b on a.id = b.id when matched then update set note = b.note',
		['archive', 'booking']
	],
	['insert into archive values (1, $$x$$) on conflict (id) do update set note = excluded.note', ['archive']],
	['analyze booking', ['booking']],
	['analyze booking (customer_id, at)', ['booking']],
	['create index booking_customer on booking (customer_id)', ['booking']],
	['create unique index archive_note on archive (id, note)', ['archive']],
	['drop index booking_at', ['booking_at']],
	['reindex table booking', ['booking']],
	['reindex index booking_at', ['booking_at']],
	['cluster booking using booking_at', ['booking', 'booking_at']],
	['create statistics booking_lane (dependencies) on customer_id, amount from booking', ['booking']],
	['truncate booking', ['booking']],
	['truncate booking, archive', ['booking', 'archive']],
	['drop table archive', ['archive']],
	['lock table booking', ['booking']],
	['lock table booking in share row exclusive mode', ['booking']],
	['lock table booking in row share mode nowait', ['booking']],
	['refresh materialized view totals', ['totals']],
	['refresh materialized view concurrently totals', ['totals']],
	['create table copy_of_booking as select * from booking', ['booking']],
	['select * into copy_of_booking from booking', ['booking']],
	['create table line (id int, booking_id int references customer (id))', ['customer']],
	['create table sailing_3 partition of sailing for values in (3)', ['sailing']],
	['create or replace view recent as select id from customer', ['recent']],
	['drop view recent', ['recent']],
	["comment on table booking is 'as told'", ['booking']],
	['create trigger keep before update on booking for each row execute function note_change()', ['booking']],
	['alter table booking add column weight int', ['booking']],
	['alter table booking add column weight int default 5 not null', ['booking']],
	['alter table booking add column token uuid default gen_random_uuid()', ['booking']],
	['alter table booking add column line int generated always as identity', ['booking']],
	['alter table booking add column customer_ref int references customer (id)', ['booking', 'customer']],
	['alter table booking drop column note', ['booking']],
	['alter table booking alter column amount type double precision', ['booking']],
	['alter table booking alter column note set not null', ['booking']],
	['alter table booking alter column note drop not null', ['booking']],
	["alter table booking alter column note set default 'x'", ['booking']],
	['alter table booking add constraint id_positive check (id > 0)', ['booking']],
	['alter table booking add constraint id_small check (id < 1000000) not valid', ['booking']],
	[
		'alter table booking add constraint booking_customer foreign key (customer_id) references customer (id)',
		['booking', 'customer']
	],
	[
		'alter table booking add constraint booking_customer foreign key (customer_id) references customer (id) not valid',
		['booking', 'customer']
	],
	['alter table booking validate constraint amount_sane', ['booking']],
	['alter table booking add constraint booking_pk primary key (id)', ['booking']],
	['alter table booking add constraint booking_uq unique using index booking_id', ['booking']],
	['alter table booking drop constraint amount_sane', ['booking']],
	['alter table booking rename to reservation', ['booking']],
	['alter table booking rename column note to remark', ['booking']],
	['alter table booking alter column customer_id set statistics 500', ['booking']],
	['alter table booking alter column customer_id set (n_distinct = -0.2)', ['booking']],
	['alter table booking set (autovacuum_vacuum_scale_factor = 0.02, fillfactor = 80)', ['booking']],
	['alter table booking alter column note set storage external', ['booking']],
	['alter table booking set unlogged', ['booking']],
	['alter table booking disable trigger all', ['booking']],
	['alter table booking enable row level security', ['booking']],
	['alter table booking replica identity full', ['booking']],
	['alter table booking cluster on booking_at', ['booking']],
	['alter table sailing attach partition sailing_2 for values in (2)', ['sailing', 'sailing_2']],
	['alter table sailing detach partition sailing_1', ['sailing', 'sailing_1']],
	['alter table booking alter column customer_id set statistics 200, add column extra text', ['booking']],
	["set local work_mem = '64MB'", ['booking']],
	["set work_mem = '64MB'", ['booking']],
	['reset work_mem', ['booking']]
];

/** Forms that the server refuses inside a transaction block. */
const REFUSED_INSIDE = [
	'vacuum booking',
	'vacuum (freeze) booking',
	'vacuum full booking',
	'create index concurrently booking_note on booking (note)',
	'drop index concurrently booking_at',
	'reindex table concurrently booking',
	'reindex index concurrently booking_at',
	'reindex schema public',
	"alter system set work_mem = '8MB'",
	'alter table sailing detach partition sailing_1 concurrently',
	'discard all'
];

let db: PGlite;
beforeAll(async () => {
	db = await PGlite.create();
	await db.exec(SETUP);
});
afterAll(async () => {
	await db.close();
});

/** The strongest mode held on the relation after the statement, in a transaction that is rolled back. */
async function strongestHeld(sql: string, relations: string[]): Promise<(string | null)[]> {
	await db.exec('begin');
	try {
		const ids = await Promise.all(
			relations.map(
				async (name) =>
					(await db.query<{ oid: number }>(`select '${name}'::regclass::oid as oid`)).rows[0]?.oid
			)
		);
		await db.exec(sql);
		const { rows } = await db.query<{ relation: number; mode: string }>(
			'select relation, mode from pg_locks where relation is not null and granted'
		);
		return ids.map((id) => strongest(rows.filter((row) => row.relation === id).map((row) => row.mode)));
	} finally {
		await db.exec('rollback');
	}
}

const ORDER = [
	'AccessShareLock',
	'RowShareLock',
	'RowExclusiveLock',
	'ShareUpdateExclusiveLock',
	'ShareLock',
	'ShareRowExclusiveLock',
	'ExclusiveLock',
	'AccessExclusiveLock'
];
function strongest(modes: string[]): string | null {
	return [...modes].sort((a, b) => ORDER.indexOf(b) - ORDER.indexOf(a))[0] ?? null;
}

describe('cautionsFor, against pg_locks of a running server', () => {
	it.each(FORMS)('predicts the lock that is held: %s', async (sql, relations) => {
		const [caution] = await cautionsFor('postgresql', '18', sql);
		expect(caution?.understood).toBe(true);
		expect(caution?.inTransaction).toBe(true);
		const held = await strongestHeld(sql, relations);
		const predicted = relations.map((name) => caution?.locks.find(({ on }) => on === name)?.mode ?? null);
		expect(predicted).toEqual(held);
	});

	it('names the table of an index as locked when the index is dropped, as the server does', async () => {
		const [caution] = await cautionsFor('postgresql', '18', 'drop index booking_at');
		expect(caution?.lock).toEqual({ mode: 'AccessExclusiveLock', on: 'the table of booking_at' });
		expect(await strongestHeld('drop index booking_at', ['booking'])).toEqual(['AccessExclusiveLock']);
	});

	it.each(REFUSED_INSIDE)(
		'says that it cannot run in a transaction block, and the server refuses it there: %s',
		async (sql) => {
			const [caution] = await cautionsFor('postgresql', '18', sql);
			expect(caution).toMatchObject({ understood: true, inTransaction: false });
			await db.exec('begin');
			await expect(db.exec(sql)).rejects.toThrow(/cannot (run inside|be executed (from|within)) a/i);
			await db.exec('rollback');
		}
	);

	it.each([
		['alter table booking add column weight int default 5', false],
		['alter table booking add column seen timestamptz default now()', false],
		['alter table booking add column token uuid default gen_random_uuid()', true],
		['alter table booking add column line bigserial', true],
		['alter table booking alter column amount type double precision', true],
		['alter table booking alter column customer_id set statistics 500', false],
		['vacuum full booking', true]
	])('knows whether the table is written anew, as its file number shows: %s', async (sql, rewrites) => {
		const [caution] = await cautionsFor('postgresql', '18', sql);
		expect(caution?.rewrites).toBe(rewrites);
		if (sql.startsWith('vacuum')) return;
		const fileOf = async () =>
			(await db.query<{ file: number }>("select pg_relation_filenode('booking') as file")).rows[0]?.file;
		await db.exec('begin');
		const before = await fileOf();
		await db.exec(sql);
		expect((await fileOf()) !== before).toBe(rewrites);
		await db.exec('rollback');
	});
});
