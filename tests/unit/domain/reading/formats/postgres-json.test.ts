import { describe, expect, test } from 'vitest';
import { BOUNDS } from '$lib/domain/reading/bounds';
import { operatorAt, read, readOne, shapeOf } from '../../../../fixtures/evidence-files';

const node = (type: string, extra: object = {}, ...plans: object[]) => ({
	'Node Type': type,
	'Startup Cost': 0,
	'Total Cost': 10,
	'Plan Rows': 10,
	'Plan Width': 8,
	'Actual Startup Time': 0.1,
	'Actual Total Time': 1,
	'Actual Rows': 10,
	'Actual Loops': 1,
	...extra,
	...(plans.length > 0 ? { Plans: plans } : {})
});
const join = node(
	'Hash Join',
	{ 'Join Type': 'Left', 'Hash Cond': '(a.x = b.x)' },
	node('Seq Scan', { 'Relation Name': 'a' }),
	node('Hash', {}, node('Seq Scan', { 'Relation Name': 'b' }))
);
const SHAPE = 'Hash Left Join(Seq Scan, Hash(Seq Scan))';
const whole = JSON.stringify([{ Plan: join, 'Planning Time': 0.5, 'Execution Time': 2 }], null, 2);

/** As psql prints one value of several lines. */
function asPsql(text: string): string {
	const lines = text.split('\n');
	const width = Math.max(...lines.map((line) => line.length)) + 2;
	const body = lines.map((line, index) => ` ${line.padEnd(width - 2)}${index < lines.length - 1 ? '+' : ''}`);
	return [' '.repeat(width / 2 - 5) + 'QUERY PLAN', '-'.repeat(width), ...body, '(1 row)', ''].join('\n');
}

describe('postgres-json', () => {
	test.each([
		['as EXPLAIN prints it', whole],
		['without line breaks', JSON.stringify([{ Plan: join }])],
		['as one object', JSON.stringify({ Plan: join })],
		['as a node alone', JSON.stringify(join)],
		['out of psql', asPsql(whole)],
		['out of psql with borders', asPsql(whole).replace(/^ (.*?)\s*\+?$/gm, '| $1 +|')],
		['in a fence with words around it', `Look:\n\`\`\`json\n${whole}\n\`\`\`\nIt's slow.`],
		['with typographic quotation marks', whole.replaceAll('"', '\u201d')],
		['as a row of a client', JSON.stringify([{ 'QUERY PLAN': [{ Plan: join }] }])],
		['as a string in a row of a client', JSON.stringify([{ 'QUERY PLAN': whole }])],
		['in quoted mail', whole.replace(/^/gm, '> ')]
	])('is read %s', async (_how, text) => {
		const reading = await readOne(text);
		expect(reading.format).toBe('postgres-json');
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe(SHAPE);
		expect(reading.warnings).toEqual([]);
	});

	test.each([
		['in one list', JSON.stringify([{ Plan: join }, { Plan: node('Result') }])],
		['one behind the other', `${whole}\n${JSON.stringify([{ Plan: node('Result') }])}`],
		[
			'with their statements between',
			`EXPLAIN SELECT 1 FROM a;\n${whole}\nEXPLAIN SELECT 2;\n${JSON.stringify([{ Plan: node('Result') }], null, 1)}`
		]
	])('gives a reading for each of several plans %s', async (_how, text) => {
		const readings = await read(text);
		expect(readings.map(({ plan }) => plan?.root.name)).toEqual(['Hash Left Join', 'Result']);
	});

	test('keeps what stands before a cut and says where it is', async () => {
		const at = whole.indexOf('"Relation Name": "b"');
		const reading = await readOne(whole.slice(0, at));
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe(SHAPE);
		const lines = whole.slice(0, at).trimEnd().split('\n');
		expect(reading.warnings).toMatchObject([{ code: 'cut-off', at: { line: lines.length } }]);
	});

	test('keeps what stands before damage', async () => {
		const reading = await readOne(whole.replace('"Hash Cond":', '"Hash Cond" =>'));
		expect(reading.plan?.root.name).toBe('Hash Left Join');
		expect(reading.warnings).toMatchObject([{ code: 'damaged' }]);
	});

	test('takes the statement of auto_explain', async () => {
		const reading = await readOne(
			JSON.stringify({ 'Query Text': "SELECT * FROM a WHERE x = 'y';", Plan: node('Result') })
		);
		expect(reading.statement?.text).toBe('SELECT * FROM a WHERE x = ?');
	});

	test('leaves out what lies deeper than the bound', async () => {
		let deep = node('Result');
		for (let i = 0; i < BOUNDS.nesting + 50; i++) deep = node('Limit', {}, deep);
		const reading = await readOne(JSON.stringify([{ Plan: deep }]));
		expect(reading.warnings.map(({ code }) => code)).toEqual(['too-deep']);
		expect(() => operatorAt(reading, `0${'.0'.repeat(BOUNDS.nesting)}`)).toThrow();
	});

	test('leaves out operators beyond the bound', async () => {
		const many = node('Append', {}, ...new Array(BOUNDS.operators + 10).fill(node('Result')));
		const reading = await readOne(JSON.stringify([{ Plan: many }]));
		expect(reading.warnings.map(({ code }) => code)).toEqual(['too-many-operators']);
		expect(reading.plan?.root.children).toHaveLength(BOUNDS.operators - 1);
	});

	test.each([
		['text', 'many'],
		['a negative number', -5],
		['a list', [1]],
		['more than can be counted', 1e300],
		['nothing', null]
	])('takes %s in place of a figure as not known', async (_what, value) => {
		const reading = await readOne(
			JSON.stringify([{ Plan: node('Result', { 'Actual Rows': value, 'Actual Total Time': value }) }])
		);
		expect(reading.plan?.root).toMatchObject({ actualRows: null, totalMs: null, ratio: null });
	});

	test('tells an operator that never ran from one that found no rows', async () => {
		const never = { 'Actual Rows': 0, 'Actual Loops': 0, 'Actual Total Time': 0 };
		const reading = await readOne(
			JSON.stringify([
				{ Plan: node('Append', {}, node('Result', never), node('Result', { 'Actual Rows': 0 })) }
			])
		);
		expect(operatorAt(reading, '0.0')).toMatchObject({
			loops: 0,
			actualRows: null,
			ratio: null,
			selfMs: null
		});
		expect(operatorAt(reading, '0.1')).toMatchObject({ loops: 1, actualRows: 0, ratio: 0.1 });
	});
});

describe('own figures', () => {
	test('charge an InitPlan to the node whose condition names its parameter', async () => {
		for (const [name, mark] of [
			['InitPlan 1 (returns $0)', '$0'],
			['InitPlan 1', '(InitPlan 1).col1']
		]) {
			const init = node('Aggregate', {
				Strategy: 'Plain',
				'Parent Relationship': 'InitPlan',
				'Subplan Name': name,
				'Actual Total Time': 6
			});
			const scan = node('Seq Scan', { Filter: `(x > ${mark})`, 'Actual Total Time': 9 });
			const reading = await readOne(
				JSON.stringify([{ Plan: node('Sort', { 'Actual Total Time': 10 }, init, scan) }])
			);
			expect([
				operatorAt(reading, '0').selfMs,
				operatorAt(reading, '0.0').selfMs,
				operatorAt(reading, '0.1').selfMs
			]).toEqual([1, 6, 3]);
		}
	});

	test('charge a CTE to its reader, once', async () => {
		const cte = node('Seq Scan', {
			'Parent Relationship': 'InitPlan',
			'Subplan Name': 'CTE recent',
			'Actual Total Time': 5,
			'Temp Written Blocks': 4
		});
		const reader = (ms: number, blocks: number) =>
			node('CTE Scan', { 'CTE Name': 'recent', 'Actual Total Time': ms, 'Temp Written Blocks': blocks });
		const reading = await readOne(
			JSON.stringify([
				{
					Plan: node(
						'Append',
						{ 'Actual Total Time': 10, 'Temp Written Blocks': 24 },
						cte,
						reader(7, 24),
						reader(2, 0)
					)
				}
			])
		);
		expect(reading.plan?.root.children.map(({ selfMs }) => selfMs)).toEqual([5, 2, 2]);
		expect(reading.plan?.root.children.map(({ temporaryBytes }) => temporaryBytes)).toEqual([
			4 * 8192,
			20 * 8192,
			0
		]);
	});

	test("set what a Gather's processes took together against its own clock", async () => {
		// Three processes of 30 ms side by side under a Gather of 35 ms.
		const scan = node('Seq Scan', { 'Parallel Aware': true, 'Actual Total Time': 30, 'Actual Loops': 3 });
		const reading = await readOne(
			JSON.stringify([
				{
					Plan: node('Gather', { 'Workers Planned': 2, 'Workers Launched': 2, 'Actual Total Time': 35 }, scan)
				}
			])
		);
		expect(operatorAt(reading, '0').selfMs).toBe(5);
		expect(operatorAt(reading, '0.0')).toMatchObject({
			name: 'Parallel Seq Scan',
			selfMs: 90,
			totalMs: 90,
			actualRows: 30,
			estimatedRows: 30,
			ratio: 1
		});
	});
});

// Defaults after the manual, "Resource Consumption": work_mem 4MB; hash_mem_multiplier 2.0 from 15 on, 1.0 before.
describe('memoryLimitKb', () => {
	const limits = async (settings: object | undefined, hash: object = {}) => {
		const plan = node(
			'Hash Join',
			{},
			node('Sort', {}),
			node('Hash', { 'Hash Batches': 1, 'Original Hash Batches': 1, 'Peak Memory Usage': 10, ...hash })
		);
		const reading = await readOne(
			JSON.stringify([{ Plan: plan, ...(settings === undefined ? {} : { Settings: settings }) }])
		);
		return [operatorAt(reading, '0.0').memoryLimitKb, operatorAt(reading, '0.1').memoryLimitKb];
	};

	test('is not known without settings', async () => {
		expect(await limits(undefined)).toEqual([null, null]);
	});
	test('is the default where the settings list none', async () => {
		expect(await limits({ jit: 'off' })).toEqual([4096, 8192]);
	});
	test('is what the settings say', async () => {
		expect(await limits({ work_mem: '256kB' })).toEqual([256, 512]);
		expect(await limits({ work_mem: '1GB', hash_mem_multiplier: '1.5' })).toEqual([1048576, 1572864]);
	});
	test('is once work_mem where a hash table that had to grow stopped there, as before 15', async () => {
		expect(await limits({ work_mem: '4MB' }, { 'Hash Batches': 8, 'Peak Memory Usage': 4060 })).toEqual([
			4096, 4096
		]);
	});
});
