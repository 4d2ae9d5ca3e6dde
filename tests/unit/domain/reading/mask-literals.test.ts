import fc from 'fast-check';
import { beforeAll, describe, expect, test } from 'vitest';
import { fingerprintStatement, prepareFingerprints } from '$lib/domain/reading/fingerprint';
import { maskStatement } from '$lib/domain/reading/mask-literals';

// Tokens after the PostgreSQL manual, 4.1 "Lexical Structure".
describe('maskStatement', () => {
	test.each([
		['numbers', 'a = 5 AND b > -3.5e-2 AND c < .5 AND d = 0xFF', 'a = ? AND b > ? AND c < ? AND d = ?'],
		['strings', "a = 'it''s' AND b = ''", 'a = ? AND b = ?'],
		['strings with escapes', "a = E'it\\'s' AND b = 2", 'a = ? AND b = ?'],
		['dollar-quoted strings', "SELECT $$a'b$$, $x$ $$ 'q' $x$", 'SELECT ?, ?'],
		['Unicode, bit and national strings', "SELECT U&'d\\0061t', B'01', x'ff', N'a'", 'SELECT ?, ?, ?, ?'],
		['strings over several lines', "a = 'one\ntwo' AND b", 'a = ? AND b'],
		['a string that never ends', "a = 'one AND b = 2", 'a = ?'],
		['dates and intervals', "date '2026-01-01' + interval'1 day'", 'date ? + interval?'],
		[
			'casts',
			"(state = 'open'::text) AND (n = '5'::numeric(10,2))",
			'(state = ?::text) AND (n = ?::numeric(?,?))'
		],
		['a list', 'a IN (1, 2, 3)', 'a IN (?)'],
		[
			'a list of casts',
			"a = ANY (ARRAY['x'::character varying, 'y'::character varying])",
			'a = ANY (ARRAY[?::character varying])'
		],
		['a list of rows', '(a, b) IN ((1, 2), (3, 4))', '(a, b) IN ((?))'],
		['rows of VALUES', "VALUES (1, 'a'), (2, 'b'),\n(3, 'c') RETURNING id", 'VALUES (?) RETURNING id'],
		['an array of text', "a = ANY ('{1,2,3}'::integer[])", 'a = ANY (?::integer[])'],
		['comments', 'SELECT a -- for 4711\nFROM b /* c /* d */ e */ WHERE f', 'SELECT a \nFROM b   WHERE f'],
		['a sign, but no subtraction', 'a = -5 AND b - 5 > c-1 LIMIT -1', 'a = ? AND b - ? > c-? LIMIT ?']
	])('masks %s', (_what, sql, masked) => {
		expect(maskStatement(sql)).toBe(masked);
	});

	test.each([
		['identifiers with digits', 'SELECT t1.c2 FROM s3.t1_x4'],
		['quoted identifiers', 'SELECT "Col 5", "it\'s", "a""b 6" FROM "T 7"'],
		['parameters', 'a = $1 AND b = $12'],
		['parts of a plan', '(id = (InitPlan 1).col1) AND (NOT (hashed SubPlan 12).col1)'],
		['NULL, TRUE and FALSE', 'a IS NULL AND b IS TRUE AND NOT FALSE'],
		['operators of JSON', 'a -> b ->> c #> d']
	])('keeps %s', (_what, sql) => {
		expect(maskStatement(sql)).toBe(sql);
	});

	test('keeps the arguments of a function apart', () => {
		expect(maskStatement("left('abc', 3)")).toBe('left(?, ?)');
	});

	test('takes an apostrophe of prose for no string', () => {
		expect(maskStatement("Here's what didn't end: SELECT a FROM b WHERE c = 'x'")).toBe(
			"Here's what didn't end: SELECT a FROM b WHERE c = ?"
		);
	});
});

/** Pieces of SQL, and of what only looks like it. */
const piece = fc.oneof(
	fc.constantFrom(
		'SELECT',
		'a',
		't1.c2',
		'"Q 1"',
		'$1',
		'(',
		')',
		'[',
		']',
		',',
		' ',
		'\n',
		'::',
		'text',
		'-',
		'+',
		'=',
		'.',
		'IN',
		'VALUES',
		'ARRAY',
		'ANY',
		'interval',
		"'",
		"''",
		'"',
		'$$',
		'--',
		'/*',
		'*/',
		'?',
		';',
		'E',
		'U&',
		'SubPlan 3',
		'é'
	),
	fc.integer().map(String),
	fc.double({ noNaN: true }).map(String),
	fc.string({ maxLength: 12 }).map((text) => `'${text.replaceAll("'", "''")}'`),
	fc.string({ maxLength: 6 })
);
const sqlText = fc.array(piece, { maxLength: 40 }).map((pieces) => pieces.join(''));

describe('maskStatement on anything', () => {
	test('changes nothing the second time', () => {
		fc.assert(
			fc.property(sqlText, (sql) => {
				const masked = maskStatement(sql);
				expect(maskStatement(masked)).toBe(masked);
			}),
			{ numRuns: 3000 }
		);
	});

	test('lets no planted literal through', () => {
		const secret = fc.stringMatching(/^[a-z]{6}[0-9]{6}$/);
		const quoted = fc.constantFrom(
			(text: string) => `'${text}'`,
			(text: string) => `E'\\'${text}'`,
			(text: string) => `$tag$${text}$tag$`,
			(text: string) => `'x''${text}'`,
			(text: string) => `'{"${text}"}'::text[]`,
			(text: string) => `U&'${text}'`,
			(text: string) => `/* ${text} */ 1`
		);
		fc.assert(
			fc.property(
				secret,
				quoted,
				fc.constantFrom('a = ', 'a IN (1, ', 'VALUES (', 'f(x, ', 'a='),
				(text, quote, before) => {
					expect(maskStatement(`SELECT b FROM c WHERE ${before}${quote(text)}) AND d = 1`)).not.toContain(
						text
					);
				}
			)
		);
	});
});

describe('fingerprintStatement', () => {
	beforeAll(prepareFingerprints);
	const fingerprint = (sql: string) => fingerprintStatement(maskStatement(sql));

	test.each([
		[
			'other literals',
			"SELECT a FROM b WHERE c = 5 AND d = 'x'",
			"SELECT a FROM b WHERE c = 4711 AND d = 'it''s'"
		],
		['another sign', 'SELECT a FROM b WHERE c = 5', 'SELECT a FROM b WHERE c = -5'],
		['a longer list', 'SELECT a FROM b WHERE c IN (1)', 'SELECT a FROM b WHERE c IN (1, 2, 3)'],
		['more rows', 'INSERT INTO b VALUES (1, 2)', 'INSERT INTO b VALUES (1, 2), (3, 4)'],
		['another layout', 'SELECT a FROM b', 'select a\n\tfrom b ;'],
		['comments', 'SELECT a FROM b', '/* run 7 */ SELECT a -- x\nFROM b']
	])('is the same with %s', (_what, one, other) => {
		expect(fingerprint(other)).toBe(fingerprint(one));
	});

	test.each([
		['another table', 'SELECT a FROM b', 'SELECT a FROM c'],
		['another operator', 'SELECT a FROM b WHERE c = 5', 'SELECT a FROM b WHERE c > 5'],
		['a parameter for a literal', 'SELECT a FROM b WHERE c = 5', 'SELECT a FROM b WHERE c = $1'],
		['a further condition', 'SELECT a FROM b WHERE c = 5', 'SELECT a FROM b WHERE c = 5 AND d = 6']
	])('is another with %s', (_what, one, other) => {
		expect(fingerprint(other)).not.toBe(fingerprint(one));
	});

	test('has 16 hex digits', () => {
		expect(fingerprint('SELECT 1')).toMatch(/^[0-9a-f]{16}$/);
	});
});
