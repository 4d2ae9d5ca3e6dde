// Outside source: PostgreSQL 18 manual, part VI, I. SQL Commands: one example of every command listed there.
import { describe, expect, it } from 'vitest';
import { cautionsFor } from '$lib/domain/caution/classify-statement';

const UNDERSTOOD = `
ABORT: abort
ALTER DATABASE: alter database freight set work_mem = '8MB'
ALTER ROLE: alter role report_ro set work_mem = '8MB'
ALTER SYSTEM: alter system set work_mem = '8MB'
ALTER TABLE: alter table booking add column note text
ALTER TYPE: alter type lane add value 'P13'
ALTER USER: alter user report_ro set work_mem = '8MB'
ANALYZE: analyze booking
BEGIN: begin
CHECKPOINT: checkpoint
CLUSTER: cluster booking using booking_at
COMMENT: comment on table booking is 'one a box'
COMMIT: commit
COMMIT PREPARED: commit prepared 'b1'
COPY: copy booking to stdout
CREATE INDEX: create index on booking (at)
CREATE MATERIALIZED VIEW: create materialized view totals as select 1
CREATE POLICY: create policy own on booking using (true)
CREATE STATISTICS: create statistics s on a, b from booking
CREATE TABLE: create table booking (id int)
CREATE TABLE AS: create table copy as select * from booking
CREATE TRIGGER: create trigger t after insert on booking for each row execute function f()
CREATE VIEW: create view v as select * from booking
DEALLOCATE: deallocate slow
DECLARE: declare c cursor for select * from booking
DELETE: delete from booking where id = 1
DISCARD: discard all
DROP INDEX: drop index booking_at
DROP MATERIALIZED VIEW: drop materialized view totals
DROP STATISTICS: drop statistics s
DROP TABLE: drop table booking
DROP VIEW: drop view v
END: end
EXPLAIN: explain select * from booking
GRANT: grant select on booking to report_ro
INSERT: insert into booking values (1)
LOCK: lock table booking
MERGE: merge into booking b using archive a on a.id = b.id when matched then delete
PREPARE: prepare slow as select 1
PREPARE TRANSACTION: prepare transaction 'b1'
REFRESH MATERIALIZED VIEW: refresh materialized view totals
REINDEX: reindex table booking
RELEASE SAVEPOINT: release savepoint s
RESET: reset work_mem
REVOKE: revoke select on booking from report_ro
ROLLBACK: rollback
ROLLBACK PREPARED: rollback prepared 'b1'
ROLLBACK TO SAVEPOINT: rollback to savepoint s
SAVEPOINT: savepoint s
SELECT: select * from booking
SELECT INTO: select * into copy from booking
SET: set work_mem = '8MB'
SET ROLE: set role report_ro
SET SESSION AUTHORIZATION: set session authorization report_ro
SET TRANSACTION: set transaction isolation level serializable
SHOW: show work_mem
START TRANSACTION: start transaction
TRUNCATE: truncate booking
UPDATE: update booking set a = 1 where id = 2
VACUUM: vacuum booking
VALUES: values (1), (2)`;

const OPENLY_NOT = `
ALTER AGGREGATE: alter aggregate f(int) rename to g
ALTER COLLATION: alter collation c rename to d
ALTER CONVERSION: alter conversion c rename to d
ALTER DEFAULT PRIVILEGES: alter default privileges grant select on tables to report_ro
ALTER DOMAIN: alter domain d drop not null
ALTER EVENT TRIGGER: alter event trigger t disable
ALTER EXTENSION: alter extension hstore update
ALTER FOREIGN DATA WRAPPER: alter foreign data wrapper w no handler
ALTER FOREIGN TABLE: alter foreign table t drop column c
ALTER FUNCTION: alter function f(int) stable
ALTER GROUP: alter group g add user u
ALTER INDEX: alter index booking_at set (fillfactor = 70)
ALTER LANGUAGE: alter language l rename to m
ALTER LARGE OBJECT: alter large object 1 owner to u
ALTER MATERIALIZED VIEW: alter materialized view totals cluster on k
ALTER OPERATOR: alter operator @@ (int, int) owner to u
ALTER OPERATOR CLASS: alter operator class c using btree rename to d
ALTER OPERATOR FAMILY: alter operator family c using btree rename to d
ALTER POLICY: alter policy own on booking using (false)
ALTER PROCEDURE: alter procedure p(int) rename to q
ALTER PUBLICATION: alter publication p add table booking
ALTER ROUTINE: alter routine r(int) rename to q
ALTER RULE: alter rule r on booking rename to q
ALTER SCHEMA: alter schema s rename to t
ALTER SEQUENCE: alter sequence s restart with 1
ALTER SERVER: alter server s options (set host 'x')
ALTER STATISTICS: alter statistics s set statistics 500
ALTER SUBSCRIPTION: alter subscription s disable
ALTER TABLESPACE: alter tablespace t rename to u
ALTER TEXT SEARCH CONFIGURATION: alter text search configuration c rename to d
ALTER TEXT SEARCH DICTIONARY: alter text search dictionary c rename to d
ALTER TEXT SEARCH PARSER: alter text search parser c rename to d
ALTER TEXT SEARCH TEMPLATE: alter text search template c rename to d
ALTER TRIGGER: alter trigger t on booking rename to u
ALTER USER MAPPING: alter user mapping for u server s options (set user 'x')
ALTER VIEW: alter view v alter column c set default 1
CALL: call tidy_up()
CLOSE: close c
CREATE ACCESS METHOD: create access method m type index handler h
CREATE AGGREGATE: create aggregate a (int) (sfunc = f, stype = int)
CREATE CAST: create cast (int as text) without function
CREATE COLLATION: create collation c (locale = 'C')
CREATE CONVERSION: create conversion c for 'UTF8' to 'LATIN1' from f
CREATE DATABASE: create database d
CREATE DOMAIN: create domain d as int
CREATE EVENT TRIGGER: create event trigger t on ddl_command_start execute function f()
CREATE EXTENSION: create extension hstore
CREATE FOREIGN DATA WRAPPER: create foreign data wrapper w
CREATE FOREIGN TABLE: create foreign table t (a int) server s
CREATE FUNCTION: create function f() returns int language sql as $$ select 1 $$
CREATE GROUP: create group g
CREATE LANGUAGE: create language l
CREATE OPERATOR: create operator @@ (leftarg = int, rightarg = int, function = f)
CREATE OPERATOR CLASS: create operator class c for type int using btree as operator 1 <
CREATE OPERATOR FAMILY: create operator family f using btree
CREATE PROCEDURE: create procedure p() language sql as $$ select 1 $$
CREATE PUBLICATION: create publication p for table booking
CREATE ROLE: create role r
CREATE RULE: create rule r as on insert to booking do nothing
CREATE SCHEMA: create schema s
CREATE SEQUENCE: create sequence s
CREATE SERVER: create server s foreign data wrapper w
CREATE SUBSCRIPTION: create subscription s connection 'x' publication p
CREATE TABLESPACE: create tablespace t location '/x'
CREATE TEXT SEARCH CONFIGURATION: create text search configuration c (copy = simple)
CREATE TEXT SEARCH DICTIONARY: create text search dictionary d (template = simple)
CREATE TEXT SEARCH PARSER: create text search parser p (start = a, gettoken = b, end = c, lextypes = d)
CREATE TEXT SEARCH TEMPLATE: create text search template t (lexize = l)
CREATE TRANSFORM: create transform for int language l (from sql with function f(internal), to sql with function g(internal))
CREATE TYPE: create type t as enum ('a')
CREATE USER: create user u
CREATE USER MAPPING: create user mapping for u server s
DO: do $$ begin end $$
DROP ACCESS METHOD: drop access method m
DROP AGGREGATE: drop aggregate a (int)
DROP CAST: drop cast (int as text)
DROP COLLATION: drop collation c
DROP CONVERSION: drop conversion c
DROP DATABASE: drop database d
DROP DOMAIN: drop domain d
DROP EVENT TRIGGER: drop event trigger t
DROP EXTENSION: drop extension hstore
DROP FOREIGN DATA WRAPPER: drop foreign data wrapper w
DROP FOREIGN TABLE: drop foreign table t
DROP FUNCTION: drop function f(int)
DROP GROUP: drop group g
DROP LANGUAGE: drop language l
DROP OPERATOR: drop operator @@ (int, int)
DROP OPERATOR CLASS: drop operator class c using btree
DROP OPERATOR FAMILY: drop operator family f using btree
DROP OWNED: drop owned by u
DROP POLICY: drop policy own on booking
DROP PROCEDURE: drop procedure p(int)
DROP PUBLICATION: drop publication p
DROP ROLE: drop role r
DROP ROUTINE: drop routine r(int)
DROP RULE: drop rule r on booking
DROP SCHEMA: drop schema s
DROP SEQUENCE: drop sequence s
DROP SERVER: drop server s
DROP SUBSCRIPTION: drop subscription s
DROP TABLESPACE: drop tablespace t
DROP TEXT SEARCH CONFIGURATION: drop text search configuration c
DROP TEXT SEARCH DICTIONARY: drop text search dictionary c
DROP TEXT SEARCH PARSER: drop text search parser c
DROP TEXT SEARCH TEMPLATE: drop text search template c
DROP TRANSFORM: drop transform for int language l
DROP TRIGGER: drop trigger t on booking
DROP TYPE: drop type t
DROP USER: drop user u
DROP USER MAPPING: drop user mapping for u server s
EXECUTE: execute slow
FETCH: fetch next from c
IMPORT FOREIGN SCHEMA: import foreign schema s from server t into u
LISTEN: listen c
LOAD: load 'x'
MOVE: move next from c
NOTIFY: notify c
REASSIGN OWNED: reassign owned by u to v
SECURITY LABEL: security label on table booking is 'x'
SET CONSTRAINTS: set constraints all deferred
UNLISTEN: unlisten c`;

const examplesOf = (text: string) =>
	text
		.trim()
		.split('\n')
		.map((line) => [line.slice(0, line.indexOf(':')), line.slice(line.indexOf(':') + 2)] as const);

describe('cautionsFor, every command of the manual', () => {
	it.each(examplesOf(UNDERSTOOD))('understands %s', async (_command, sql) => {
		expect(await cautionsFor('postgresql', '18', sql)).toMatchObject([{ understood: true, sql }]);
	});

	it.each(examplesOf(OPENLY_NOT))('says that it does not understand %s', async (_command, sql) => {
		const cautions = await cautionsFor('postgresql', '18', sql);
		expect(cautions).toMatchObject([{ understood: false, level: 3, sql }]);
		// It is the lock table that does not know it, not the grammar.
		expect(cautions[0]?.load).not.toContain('grammar refuses');
	});
});
