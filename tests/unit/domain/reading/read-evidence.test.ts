import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { readEvidence, readText } from '$lib/domain/reading/read-evidence';
import { BOUNDS } from '$lib/domain/reading/bounds';
import {
	evidenceOf,
	FIXTURE_FORMATS,
	inPieces,
	read,
	readOne,
	shapeOf
} from '../../../fixtures/evidence-files';

const PLAN =
	"Seq Scan on crate c  (cost=0.00..9.10 rows=5 width=8) (actual time=0.010..0.200 rows=7 loops=2)\n  Filter: (state = 'open'::text)\n  Rows Removed by Filter: 3\nExecution Time: 0.500 ms\n";

describe('readText', () => {
	test('keeps the evidence and says so when a reader meets what nobody foresaw', () => {
		const broken = {
			read: () => {
				throw new Error('a path that is no path');
			}
		};
		const { plans, warnings } = readText(broken, 'anything');
		expect(plans).toEqual([]);
		expect(warnings.map(({ code }) => code)).toEqual(['reader-fault']);
		expect(warnings[0]?.message).toContain('a path that is no path');
	});
});

describe('readEvidence on what it cannot read', () => {
	test.each([
		['an empty file', '', 'empty'],
		['blanks alone', ' \n\n', 'empty'],
		['prose', 'The invoice run was slow again last night.', 'unknown-format'],
		['a statement without its plan', 'SELECT * FROM crate WHERE state = 1;', 'statement-only'],
		['JSON that is no plan', '{"state": "open"}', 'other-json'],
		['HTML', '<!doctype html><p>no</p>', 'other-xml'],
		[
			'Showplan XML',
			'<ShowPlanXML xmlns="http://x" Version="1.5"><BatchSequence/></ShowPlanXML>',
			'showplan-xml'
		],
		['a MariaDB plan', '{"query_block": {"select_id": 1, "r_loops": 1}}', 'mariadb-json'],
		[
			'a slow query log',
			'# User@Host: a[a] @ localhost []\n# Query_time: 2.1\nSELECT 1;',
			'mariadb-slow-log'
		],
		[
			"MySQL's tree",
			'-> Table scan on t1  (cost=0.35 rows=10) (actual time=0.011..0.015 rows=10 loops=1)',
			'mysql-tree'
		]
	])('says what %s looks like', async (_what, text, code) => {
		const reading = await readOne(text);
		expect(reading).toMatchObject({ format: 'unknown', kind: 'unknown', plan: null, spills: null });
		expect(reading.warnings.map((warning) => warning.code)).toEqual([code]);
	});

	test.each([
		['PNG', [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13]],
		['JPEG', [0xff, 0xd8, 0xff, 0xe0, 0, 16, 74, 70, 73, 70]],
		['gzip', [0x1f, 0x8b, 8, 0, 0, 0, 0, 0, 0, 3]],
		['zip', [0x50, 0x4b, 3, 4, 20, 0, 0, 0, 8, 0]]
	])('names a %s file and keeps its bytes', async (what, head) => {
		const bytes = new Uint8Array([...head, ...new Array<number>(64).fill(0)]);
		const reading = await readOne(bytes);
		expect(reading.warnings[0]?.code).toBe('not-text');
		expect(reading.warnings[0]?.message).toContain(what);
		expect(reading.bytes).toBe(bytes.length);
	});

	test('does not read a plan above the bound, and says so', async () => {
		const filler = PLAN + '\n'.repeat(BOUNDS.planBytes);
		const reading = await readOne(filler);
		expect(reading.format).toBe('unknown');
		expect(reading.warnings[0]?.code).toBe('too-large');
	});
});

describe('readEvidence', () => {
	test.each(
		FIXTURE_FORMATS.flatMap((format) => evidenceOf(format)).map(
			(one) => [`${one.format}/${one.name}/${one.file}`, one] as const
		)
	)('recognises %s by its content', async (_title, fixture) => {
		const readings = await read(readFileSync(fixture.path), 'photo.jpg');
		expect(readings[0]?.format).toBe(fixture.format);
		expect(readings[0]?.warnings).toEqual([]);
	});

	test('reads the same whatever the pieces that bytes come in', async () => {
		const fixture = evidenceOf('postgres-log')[0];
		const bytes = readFileSync(fixture?.path ?? '');
		const whole = await read(bytes);
		for (const size of [1, 7, 1000]) {
			expect(await readEvidence(inPieces(bytes, size), 'evidence')).toEqual(whole);
		}
	});

	test('carries the name that it was given and counts the masked bytes', async () => {
		const [reading] = await readEvidence(inPieces(PLAN), 'plan of tuesday.txt');
		expect(reading?.name).toBe('plan of tuesday.txt');
		expect(reading?.bytes).toBe(PLAN.length - "'open'".length + 1);
		expect(reading?.sha256).toMatch(/^[0-9a-f]{64}$/);
	});

	test('gives an operator exactly the fields of the interface', async () => {
		const reading = await readOne(PLAN);
		expect(reading.plan?.root).toEqual({
			path: '0',
			kind: 'seq-scan',
			name: 'Seq Scan',
			relation: 'crate',
			alias: 'c',
			condition: '(state = ?::text)',
			estimatedRows: 10,
			actualRows: 14,
			loops: 2,
			width: 8,
			selfMs: 0.4,
			totalMs: 0.4,
			memoryKb: null,
			memoryLimitKb: null,
			batches: null,
			plannedBatches: null,
			temporaryBytes: null,
			discardedRows: 6,
			ratio: 1.4,
			qError: 1.4,
			children: []
		});
	});

	const windows = (text: string) => text.replaceAll('\n', '\r\n');
	const utf16 = (text: string) => new Uint8Array(Buffer.from(`\ufeff${text}`, 'utf16le'));
	test.each([
		['Windows line ends', windows(PLAN)],
		['a byte order mark', `\ufeff${PLAN}`],
		['UTF-16', utf16(PLAN)],
		['UTF-16 without its mark', new Uint8Array(Buffer.from(PLAN, 'utf16le'))],
		['Latin-1', new Uint8Array(Buffer.from(PLAN.replace('open', 'geöffnet'), 'latin1'))],
		['non-breaking spaces', PLAN.replaceAll('  ', '\u00a0 ')],
		['a Markdown fence', `\`\`\`sql\n${PLAN}\`\`\`\n`],
		['a quoted mail', PLAN.replace(/^(?=.)/gm, '> ')],
		['blanks before every line', PLAN.replace(/^(?=.)/gm, '      ')]
	])('reads through %s', async (_what, text) => {
		const reading = await readOne(text);
		expect(reading.warnings).toEqual([]);
		expect(reading.plan === null ? '' : shapeOf(reading.plan.root)).toBe('Seq Scan');
		expect(reading.plan?.root).toMatchObject({
			actualRows: 14,
			discardedRows: 6,
			condition: '(state = ?::text)'
		});
	});
});
