import { describe, expect, test } from 'vitest';
import { findIn, interpret } from '../../../../fixtures/symptom-plans';

describe('no-runtime-figures', () => {
	test('says how to get them', () => {
		const [found] = findIn('nested-loop-blowup-078', 'no-runtime-figures');
		expect(found?.summary).toContain('EXPLAIN (ANALYZE, BUFFERS, SETTINGS)');
	});

	test('is all that a plan of estimates is charged with', () => {
		expect(interpret('missing-index-join-079').symptoms.map(({ id }) => id)).toEqual(['no-runtime-figures']);
	});

	test('says nothing of a measured plan', () => {
		expect(findIn('healthy-060', 'no-runtime-figures')).toEqual([]);
	});
});
