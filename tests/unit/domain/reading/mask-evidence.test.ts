import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { evidenceOf, FIXTURE_FORMATS, mask, read } from '../../../fixtures/evidence-files';

const fixtures = FIXTURE_FORMATS.flatMap((format) => evidenceOf(format));

/** Damage as it happens to files on their way: cut, lines lost, quoted, trimmed, joined with others, bits flipped. */
const damage = fc.record({
	file: fc.integer({ min: 0, max: fixtures.length - 1 }),
	other: fc.integer({ min: 0, max: fixtures.length - 1 }),
	at: fc.double({ min: 0, max: 1, noNaN: true }),
	how: fc.constantFrom(
		'none',
		'cut',
		'head lost',
		'quoted',
		'trimmed',
		'spliced',
		'flipped',
		'digits',
		'fenced',
		'lines lost'
	)
});

function damaged({
	file,
	other,
	at,
	how
}: {
	file: number;
	other: number;
	at: number;
	how: string;
}): Uint8Array {
	const bytes = readFileSync(fixtures[file]?.path ?? '').subarray(0, 40_000);
	const text = bytes.toString('utf8');
	const place = Math.floor(at * bytes.length);
	switch (how) {
		case 'cut':
			return bytes.subarray(0, place);
		case 'head lost':
			return bytes.subarray(place);
		case 'quoted':
			return Buffer.from(text.replace(/^/gm, '> '));
		case 'trimmed':
			return Buffer.from(text.replace(/^\s+/gm, ''));
		case 'spliced':
			return Buffer.concat([
				bytes.subarray(0, place),
				readFileSync(fixtures[other]?.path ?? '').subarray(place, place + 20_000)
			]);
		case 'flipped': {
			const copy = Buffer.from(bytes);
			for (let i = 0; i < 10; i++) {
				const index = Math.floor(((at * 7919 + i * 104_729) % 1) * copy.length);
				copy[index] = (copy[index] ?? 0) ^ (1 << (i % 8));
			}
			return copy;
		}
		case 'digits':
			return Buffer.from(text.replace(/\d{3,}/g, '9'.repeat(30)));
		case 'fenced':
			return Buffer.from(
				`Hello, here's last night's plan, it doesn't look well:\n\`\`\`\n${text}\n\`\`\`\nBye\n`
			);
		case 'lines lost':
			return Buffer.from(
				text
					.split('\n')
					.filter((_line, index) => index % 7 !== Math.floor(at * 7))
					.join('\r\n')
			);
		default:
			return bytes;
	}
}

describe('maskEvidence', () => {
	test('changes nothing the second time, and reading it is reading the original', async () => {
		await fc.assert(
			fc.asyncProperty(damage, async (how) => {
				const bytes = damaged(how);
				const masked = await mask(bytes, 1000);
				expect(await mask(new TextEncoder().encode(masked), 777)).toBe(masked);
				expect(await read(masked)).toEqual(await read(bytes));
			}),
			{ numRuns: 150 }
		);
	}, 120_000);

	test.each(fixtures.map((one) => [`${one.format}/${one.name}/${one.file}`, one] as const))(
		'leaves no literal of a condition in %s',
		async (_title, fixture) => {
			const text = readFileSync(fixture.path, 'utf8');
			const masked = await mask(text);
			// Settings keep their values; they are no data.
			const data = text.replace(/Settings: .*|"Settings": \{[^}]*\}|<Settings>[^]*?<\/Settings>/g, '');
			const literals = new Set(
				[...data.matchAll(/'((?:[^'\n]|''){3,})'(?:::|\)|;| |$)/gm)].map((match) => match[1] ?? '')
			);
			for (const literal of literals) expect(masked).not.toContain(`'${literal}'`);
			expect(masked.length).toBeGreaterThan(0);
		}
	);

	const planted = 'zanzibar4711';
	test.each([
		[
			'a condition of the text form',
			`Seq Scan on a  (cost=0.00..1.00 rows=1 width=4)\n  Filter: (b = '${planted}'::text)\n`
		],
		[
			'a condition over two lines',
			`Seq Scan on a  (cost=0.00..1.00 rows=1 width=4)\n  Filter: (b = 'one\n${planted}'::text)\n`
		],
		[
			'a property of a later version',
			`Seq Scan on a  (cost=0.00..1.00 rows=1 width=4)\n  New Thing: (b = '${planted}')\n`
		],
		[
			'the statement above',
			`EXPLAIN SELECT * FROM a WHERE b = '${planted}';\nSeq Scan on a  (cost=0.00..1.00 rows=1 width=4)\n`
		],
		[
			'a JSON plan',
			`[{"Plan": {"Node Type": "Seq Scan", "Filter": "(b = '${planted}'::text)", "Plan Rows": 1}}]`
		],
		[
			'a key that JSON plans do not have',
			`[{"Plan": {"Node Type": "Seq Scan", "Whatever": ["'${planted}'"], "Plan Rows": 1}}]`
		],
		[
			'a JSON plan cut inside a string',
			`[{"Plan": {"Node Type": "Seq Scan", "Plan Rows": 1, "Filter": "(b = '${planted}`
		],
		[
			'a JSON plan in a string',
			JSON.stringify([
				{ 'QUERY PLAN': `[{"Plan": {"Node Type": "Seq Scan", "Filter": "(b = '${planted}')"}}]` }
			])
		],
		[
			'a JSON plan that lost a quotation mark',
			`[{"Plan": {"Node Type": "Seq Scan", "Filter: "(b = '${planted}'::text)", "Plan Rows": 1}}]`
		],
		['a YAML plan', `- Plan: \n    Node Type: "Seq Scan"\n    Filter: "(b = '${planted}'::text)"\n`],
		[
			'an XML plan',
			`<explain xmlns="http://www.postgresql.org/2009/explain"><Query><Plan><Node-Type>Seq Scan</Node-Type><Filter>(b = '${planted}'::text)</Filter></Plan></Query></explain>`
		],
		['a statement of a log', `2026-01-01 00:00:00 UTC [1] STATEMENT:  SELECT\n\t'${planted}'\n`],
		['parameters of a log', `2026-01-01 00:00:00 UTC [1] DETAIL:  parameters: $1 = '${planted}'\n`],
		[
			'a log without its tabs',
			`2026-01-01 00:00:00 UTC [1] STATEMENT:  SELECT a\nFROM b WHERE c = '${planted}'\n`
		],
		[
			'a csvlog',
			`2026-01-01 00:00:00.000 UTC,"u","d",1,"[local]",6b0e4724.1,1,"SELECT",2026-01-01 00:00:00 UTC,1/1,0,ERROR,22012,"division by zero",,,,,,"SELECT '${planted}'",,,"app","client backend",,0\n`
		],
		[
			'a jsonlog',
			`{"timestamp":"2026-01-01 00:00:00.000 UTC","pid":1,"error_severity":"ERROR","message":"x","statement":"SELECT '${planted}'"}\n`
		],
		['a statement alone', `SELECT * FROM a WHERE b = '${planted}'`],
		['prose', `The password: ${planted} did it.`]
	])('lets nothing through from %s', async (_where, text) => {
		expect(await mask(text)).not.toContain('zanzibar');
	});

	test('passes a picture through unchanged', async () => {
		const bytes = new Uint8Array([0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10, 0, 1, 2, 3, 0xff]);
		expect(await mask(bytes)).toBe(new TextDecoder().decode(bytes));
	});
});

describe('maskEvidence on the data that COPY quotes', () => {
	// copyfrom.c, CopyFromErrorCallback: "COPY %s, line %d, column %s: \"%s\"" and "COPY %s, line %d: \"%s\"".
	const errors = ['COPY booking, line 3, column note: "Zimt"', 'COPY freight.booking, line 4: "1\tZimt\tx"'];
	const time = '2026-03-01 10:00:00.000 UTC';
	test.each(
		errors.flatMap((context) => [
			[`${time} [42] app@freight ERROR:  invalid input\n${time} [42] app@freight CONTEXT:  ${context}\n`],
			[
				`${JSON.stringify({ timestamp: time, pid: 42, error_severity: 'ERROR', message: 'invalid input', context })}\n`
			]
		])
	)('keeps none of it: %s', async (log) => {
		const masked = await mask(log);
		expect(masked).not.toContain('Zimt');
		expect(masked).toContain('COPY');
	});
});
