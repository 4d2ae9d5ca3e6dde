import { describe, expect, test } from 'vitest';
import { findIn, nodeAt } from '../../../../fixtures/symptom-plans';

describe('missing-parallel-workers', () => {
	test('gives planned and launched', () => {
		expect(findIn('workers-not-launched-035', 'missing-parallel-workers')[0]?.figures).toEqual({
			planned: 2,
			launched: 0
		});
	});

	test('reports nothing where all started', () => {
		expect(findIn('healthy-066', 'missing-parallel-workers')).toEqual([]);
	});

	test('reports nothing where the operator was never reached', () => {
		const [found] = findIn('workers-not-launched-035', 'missing-parallel-workers');
		const never = findIn('workers-not-launched-035', 'missing-parallel-workers', (root) => {
			nodeAt(root, found?.operator ?? '0')['Actual Loops'] = 0;
		});
		expect(never).toEqual([]);
	});
});
