import { describe, expect, test } from 'vitest';
import { operatorAt, read, readOne, shapeOf } from '../../../../fixtures/evidence-files';

// Lines after explain.c, text form, of 12 to 18.
const PLAN = [
	'Sort  (cost=10.00..11.00 rows=100 width=14) (actual time=5.000..6.000 rows=1000 loops=1)',
	'  Sort Key: c.state, c."Odd, Name" DESC',
	'  Sort Method: external merge  Disk: 120kB',
	'  Buffers: shared hit=10 read=5, temp read=15 written=15',
	'  ->  Hash Left Join  (cost=1.00..9.00 rows=100 width=14) (actual time=1.000..4.000 rows=1000 loops=1)',
	'        Hash Cond: (c.id = o.crate_id)',
	'        Buffers: shared hit=10 read=5',
	'        ->  Index Scan Backward using crate_pkey on freight.crate c  (cost=0.10..5.00 rows=100 width=8) (actual time=0.010..0.500 rows=50.50 loops=2)',
	"              Index Cond: (id < '500'::bigint)",
	"              Filter: (state ~~ 'a->b%'::text)",
	'              Rows Removed by Filter: 7',
	'        ->  Hash  (cost=0.50..0.50 rows=10 width=10) (actual time=0.300..0.300 rows=900 loops=1)',
	'              Buckets: 2048 (originally 1024)  Batches: 4 (originally 1)  Memory Usage: 385kB',
	'              ->  Seq Scan on crate_order o  (cost=0.00..0.50 rows=10 width=10) (never executed)',
	"Settings: work_mem = '64kB', search_path = 'a, b'",
	'Planning Time: 0.300 ms',
	'Execution Time: 7.000 ms'
];
const TEXT = `${PLAN.join('\n')}\n`;
const SHAPE = 'Sort(Hash Left Join(Index Scan, Hash(Seq Scan)))';
const indent = (text: string, by: string) => text.replace(/^(?=.)/gm, by);

describe('postgres-text', () => {
	test('fills in every figure that the lines hold', async () => {
		const reading = await readOne(TEXT);
		expect(reading.warnings).toEqual([]);
		expect(reading.plan).toMatchObject({
			totalMs: 7,
			planningMs: 0.3,
			settings: { work_mem: '64kB', search_path: 'a, b' }
		});
		expect(operatorAt(reading, '0')).toMatchObject({
			kind: 'sort',
			condition: 'c.state, c."Odd, Name" DESC',
			temporaryBytes: 15 * 8192,
			memoryLimitKb: 64,
			selfMs: 2
		});
		expect(operatorAt(reading, '0.0')).toMatchObject({
			kind: 'hash-join',
			temporaryBytes: 0,
			condition: '(c.id = o.crate_id)'
		});
		expect(operatorAt(reading, '0.0.0')).toMatchObject({
			kind: 'index-scan',
			relation: 'crate',
			alias: 'c',
			estimatedRows: 200,
			actualRows: 101,
			discardedRows: 14,
			condition: '(id < ?::bigint) AND (state ~~ ?::text)'
		});
		expect(operatorAt(reading, '0.0.1')).toMatchObject({
			kind: 'hash-build',
			batches: 4,
			plannedBatches: 1,
			memoryKb: 385,
			qError: 90
		});
		expect(operatorAt(reading, '0.0.1.0')).toMatchObject({ loops: 0, actualRows: null, ratio: null });
	});

	const ruled = (text: string, rows: string) =>
		`${' '.repeat(40)}QUERY PLAN\n${'-'.repeat(90)}\n${indent(text, ' ')}(${rows})\n\n`;
	test.each([
		['bare', TEXT],
		['out of psql', ruled(TEXT, '17 rows')],
		['out of psql in German', ruled(TEXT, '17 Zeilen')],
		[
			'out of psql with borders',
			`+${'-'.repeat(100)}+\n|${' '.repeat(45)}QUERY PLAN${' '.repeat(45)}|\n+${'-'.repeat(100)}+\n${TEXT.replace(/^(.+)$/gm, (line) => `| ${line.padEnd(100)} |`)}+${'-'.repeat(100)}+\n`
		],
		['as one value with a margin', TEXT.replace(/(?<=.)$/gm, '  +')],
		['indented by tabs', TEXT.replace(/^ +/gm, (blanks) => '\t'.repeat(Math.ceil(blanks.length / 2)))],
		['indented by half', TEXT.replace(/^ +/gm, (blanks) => ' '.repeat(blanks.length / 2))],
		['behind tabs, as in a log', indent(TEXT, '\t')],
		[
			'with its long lines broken',
			TEXT.replaceAll(' (actual', '\n(actual').replaceAll(' rows=100 width', '\nrows=100 width')
		]
	])('reads a plan %s', async (_how, text) => {
		const reading = await readOne(text);
		expect(reading.format).toBe('postgres-text');
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe(SHAPE);
		expect(reading.warnings).toEqual([]);
	});

	// Each a line of EXPLAIN's own order: figures first, Execution Time last; psql counts the rows below.
	test.each([
		['behind the last operator', PLAN.slice(0, 14).join('\n')],
		['between two operators', PLAN.slice(0, 8).join('\n')],
		[
			'within an operator',
			`${PLAN.slice(0, 4).join('\n')}\n  ->  Hash Left Join  (cost=1.00..9.00 rows=100 width=14) (act`
		],
		['before the time of execution', PLAN.slice(0, 16).join('\n')],
		[
			'out of psql, without figures',
			`  QUERY PLAN\n------\n Limit  (cost=0.00..1.00 rows=1 width=4)\n   ->  Seq Scan on crate  (cost=0.00..9.00 rows=9 width=4)\n`
		]
	])('says that a plan is cut off %s', async (_where, text) => {
		const reading = await readOne(text);
		expect(reading.plan).not.toBeNull();
		expect(reading.warnings.map(({ code }) => code)).toContain('cut-off');
	});

	test.each([
		[
			'estimates alone',
			'Limit  (cost=0.00..1.00 rows=1 width=4)\n  ->  Seq Scan on crate  (cost=0.00..9.00 rows=9 width=4)\n'
		],
		[
			'estimates out of psql',
			' QUERY PLAN\n------\n Seq Scan on crate  (cost=0.00..9.00 rows=9 width=4)\n(1 row)\n'
		],
		['a plan of auto_explain', `Query Text: select 1\n${PLAN.slice(0, 15).join('\n')}\n`]
	])('takes %s for whole', async (_what, text) => {
		expect((await readOne(text)).warnings).toEqual([]);
	});

	test('works out the nesting where the indentation was lost, and says so', async () => {
		const reading = await readOne(TEXT.replace(/^ +/gm, ''));
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe(SHAPE);
		expect(reading.warnings.map(({ code }) => code)).toEqual(['indentation-lost']);
	});

	test.each([
		[
			'EXPLAIN without options',
			'EXPLAIN SELECT * FROM crate WHERE id = 5;',
			'SELECT * FROM crate WHERE id = ?'
		],
		[
			'EXPLAIN with options',
			"explain (analyze, buffers, format text)\nselect *\nfrom crate where state = 'x'",
			'select *\nfrom crate where state = ?'
		],
		['EXPLAIN ANALYZE VERBOSE', 'EXPLAIN ANALYZE VERBOSE SELECT 1', 'SELECT ?'],
		[
			'a prompt',
			"freight=> EXPLAIN SELECT *\nfreight-> FROM crate WHERE state = 'x';",
			'SELECT *\nFROM crate WHERE state = ?'
		],
		['a statement alone', 'WITH r AS (SELECT 1)\nSELECT * FROM r', 'WITH r AS (SELECT ?)\nSELECT * FROM r'],
		['settings before it', "SET work_mem = '1MB';\nSET\nEXPLAIN SELECT a FROM crate;", 'SELECT a FROM crate'],
		[
			'Query Text of auto_explain',
			'LOG:  duration: 5.5 ms  plan:\n\tQuery Text: SELECT a\n\tFROM crate;',
			'SELECT a\n\tFROM crate'
		]
	])('takes the statement above: %s', async (_what, above, statement) => {
		const [reading] = (await read(`${above}\n\n${TEXT}`)).filter(({ kind }) => kind === 'plan');
		expect(reading?.statement?.text.replaceAll('\t', '')).toBe(statement.replaceAll('\t', ''));
	});

	test('gives a reading for each of several plans, each with its statement', async () => {
		const two = `EXPLAIN SELECT 1;\n${ruled('Result  (cost=0.00..0.01 rows=1 width=4)\n', '1 row')}EXPLAIN SELECT a FROM crate;\n${ruled(TEXT, '17 rows')}`;
		const readings = await read(two);
		expect(readings.map(({ plan, statement }) => [plan?.root.name, statement?.text])).toEqual([
			['Result', 'SELECT ?'],
			['Sort', 'SELECT a FROM crate']
		]);
	});

	test('counts lines that belong to nothing', async () => {
		const reading = await readOne(TEXT.replace('  Sort Method', '  what is this\n  Sort Method'));
		expect(reading.warnings).toMatchObject([{ code: 'lines-not-understood', at: { line: 3, column: 1 } }]);
		expect(operatorAt(reading, '0').temporaryBytes).toBe(15 * 8192);
	});

	test('hangs subplans under their owners by their labels', async () => {
		const text = [
			'Seq Scan on crate c  (cost=0.00..9.00 rows=5 width=8) (actual time=0.100..9.000 rows=5 loops=1)',
			'  Filter: (weight > (InitPlan 2).col1)',
			'  CTE recent',
			'    ->  Seq Scan on move  (cost=0.00..1.00 rows=5 width=8) (actual time=0.100..1.000 rows=5 loops=1)',
			'  InitPlan 2',
			'    ->  Aggregate  (cost=0.00..2.00 rows=1 width=8) (actual time=2.000..2.000 rows=1 loops=1)',
			'          ->  CTE Scan on recent r  (cost=0.00..1.50 rows=5 width=8) (actual time=0.100..1.500 rows=5 loops=1)',
			'  SubPlan 3',
			'    ->  Index Only Scan using box_idx on box  (cost=0.00..1.00 rows=1 width=0) (actual time=0.200..0.200 rows=1 loops=5)',
			'          Heap Fetches: 0'
		].join('\n');
		const reading = await readOne(text);
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe(
			'Seq Scan(Seq Scan, Aggregate(CTE Scan), Index Only Scan)'
		);
		expect(operatorAt(reading, '0.1.0')).toMatchObject({
			kind: 'cte-scan',
			relation: 'recent',
			alias: 'r',
			selfMs: 0.5
		});
		// 9 ms less the SubPlan's 5 × 0.2 and the InitPlan that its filter reads.
		expect(operatorAt(reading, '0').selfMs).toBe(6);
	});

	test('reads what each worker says of itself', async () => {
		const text = [
			'Gather Merge  (cost=0.00..9.00 rows=5 width=8) (actual time=1.000..9.000 rows=30 loops=1)',
			'  Workers Planned: 2',
			'  Workers Launched: 2',
			'  ->  Sort  (cost=0.00..5.00 rows=5 width=8) (actual time=1.000..8.000 rows=10 loops=3)',
			'        Sort Key: a',
			'        Sort Method: external merge  Disk: 100kB',
			'        Worker 0:  actual time=1.000..8.000 rows=10 loops=1',
			'          Sort Method: external merge  Disk: 200kB',
			'        Worker 1:  Sort Method: quicksort  Memory: 50kB',
			'        ->  Parallel Seq Scan on crate  (cost=0.00..4.00 rows=5 width=8) (actual time=0.100..2.000 rows=10 loops=3)'
		].join('\n');
		const reading = await readOne(text);
		expect(operatorAt(reading, '0.0')).toMatchObject({ memoryKb: 50, temporaryBytes: 300 * 1024 });
		expect(operatorAt(reading, '0.0.0').name).toBe('Parallel Seq Scan');
	});

	test.each([
		['HashAggregate', 'hash-aggregate'],
		['Partial GroupAggregate', 'group-aggregate'],
		['MixedAggregate', 'hash-aggregate'],
		['HashSetOp Except All', 'set-op'],
		['Nested Loop Anti Join', 'nested-loop'],
		['Merge Full Join', 'merge-join'],
		['Hash Right Semi Join', 'hash-join'],
		['Insert on crate', 'modify'],
		['Memoize', 'memoize'],
		['WindowAgg', 'window'],
		['Incremental Sort', 'incremental-sort'],
		['Tid Scan on crate', 'lookup'],
		['Bitmap Index Scan on crate_idx', 'bitmap-index'],
		['Function Scan on generate_series g', 'function-scan'],
		['Values Scan on "*VALUES*"', 'values'],
		['Parallel Append', 'append'],
		['Custom Scan (Columnar) on crate', 'other'],
		['Something New', 'other']
	])('knows %s as %s', async (name, kind) => {
		const reading = await readOne(`${name}  (cost=0.00..1.00 rows=1 width=4)\n`);
		expect(reading.plan?.root.kind).toBe(kind);
		expect(reading.plan?.root.name).toBe(name.replace(/ on .*/, ''));
	});

	test('reads COSTS OFF, where names stand alone', async () => {
		const reading = await readOne("Limit\n  ->  Seq Scan on crate\n        Filter: (state = 'x'::text)\n");
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe('Limit(Seq Scan)');
		expect(operatorAt(reading, '0.0')).toMatchObject({ relation: 'crate', estimatedRows: null, loops: null });
	});
});
