import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { allOf, anyOf } from '$lib/domain/search/match-expression';
import { parseQuery } from '$lib/domain/search/parse-query';
import { stemsOf } from '$lib/domain/precedent/tokens';
import { select } from '$lib/server/db/query';
import { withDatabase } from '../../../fixtures/database';

withDatabase();

/** Asks a real FTS5 table; throws where the expression is none. */
function match(expression: string): Promise<object[]> {
	return select('SELECT rowid FROM incidentText WHERE incidentText MATCH :expression', { expression });
}

const HOSTILE = fc.oneof(
	fc.string({ unit: 'binary', maxLength: 60 }),
	fc.string({
		unit: fc.constantFrom(
			'"',
			"'",
			'*',
			'^',
			':',
			'(',
			')',
			'+',
			'-',
			' ',
			'a',
			'\0',
			'\\',
			'{',
			'}',
			',',
			'~'
		),
		maxLength: 30
	}),
	fc.constantFrom(
		'title:x',
		'NEAR(a b, 5)',
		'a AND',
		'NOT',
		'OR OR',
		'"',
		'""',
		'a"b',
		"' OR 1=1 --",
		'{title narrative}:x',
		'^a',
		'-title:a',
		':filter',
		'$1 ?1 @x #x'
	)
);

describe('match expressions', () => {
	it('are null where there is nothing to look for', () => {
		expect(anyOf(['*', '"', ''])).toBeNull();
		expect(allOf({ phrases: [], unfinished: null, excluded: [['lock']] })).toBeNull();
	});

	it('are understood by FTS5 whatever a person types', async () => {
		await fc.assert(
			fc.asyncProperty(fc.array(HOSTILE, { maxLength: 4 }), HOSTILE, async (texts, last) => {
				const expressions = [
					anyOf(texts),
					allOf({
						phrases: [...texts.map(stemsOf), texts],
						unfinished: { stem: last, beginning: last },
						excluded: texts.map(stemsOf)
					})
				];
				for (const expression of expressions) {
					if (expression !== null) expect(await match(expression)).toEqual([]);
				}
			}),
			{ numRuns: 300 }
		);
	});

	it('are understood by FTS5 for any line of the search box', async () => {
		await fc.assert(
			fc.asyncProperty(HOSTILE, async (line) => {
				const query = parseQuery(line, new Date(0));
				const expression = allOf({
					phrases: [...query.words, ...query.phrases].map(stemsOf),
					unfinished: null,
					excluded: query.excluded.map(stemsOf)
				});
				if (expression !== null) expect(await match(expression)).toEqual([]);
			}),
			{ numRuns: 300 }
		);
	});
});
