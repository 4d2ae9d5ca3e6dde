import { describe, expect, test } from 'vitest';
import { interpret, nodeAt } from '../../../fixtures/symptom-plans';

describe('findTrails', () => {
	test('follows an underestimate to the hash join that it overflowed and the sort above', () => {
		const [trail, ...others] = interpret('stale-statistics-001').trails;
		expect(others).toEqual([]);
		expect(trail?.overflow).toBe('0.0.0');
		expect(trail?.steps.map(({ operator }) => operator)).toEqual(['0.0.0.1.0', '0.0.0', '0.0']);
		expect(trail?.steps[0]).toMatchObject({ expected: 800, actual: 450300 });
		expect(trail?.sentence).toBe(
			'The estimate goes wrong at scan of invoice_line (expected 800, got 450,300) and overflows at hash join on invoice_no: 8 batches, 55.1 MB of temporary files, and again at sort by i.currency, l.charge_code: 11.2 MB of temporary files.'
		);
	});

	test('counts the joins on the way', () => {
		expect(interpret('correlated-predicates-011').trails[0]?.sentence).toContain(
			'stays wrong through 1 join, and overflows at sort'
		);
	});

	test('ends without overflow at the highest operator that is still wrong', () => {
		const [trail] = interpret('correlated-predicates-010').trails;
		expect(trail?.overflow).toBeNull();
		expect(trail?.steps.map(({ operator }) => operator)).toEqual(['0.0.0.0', '0.0.0', '0.0', '0']);
		expect(trail?.sentence).toContain('is still wrong at');
	});

	test('begins and overflows at one operator where groups were misjudged', () => {
		const [trail] = interpret('hash-aggregate-spill-018').trails;
		expect(trail).toMatchObject({ overflow: '0', steps: [{ operator: '0', expected: 900, actual: 311693 }] });
		expect(trail?.sentence).toContain('overflows there: 165 batches');
	});

	test('leads the trail that fills the hash table before that of the probing side', () => {
		const { trails } = interpret('stale-statistics-001', (root) => {
			Object.assign(nodeAt(root, '0.0.0.0'), { 'Plan Rows': 500 });
		});
		expect(trails.map(({ overflow }) => overflow)).toEqual(['0.0.0', '0.0.0']);
		expect(trails.map(({ steps }) => steps[0]?.operator)).toEqual(['0.0.0.1.0', '0.0.0.0']);
	});

	test('leaves an overflow that an error did not reach to itself', () => {
		// The window above the sort keeps too many rows; the sort below got what was expected.
		const { trails } = interpret('sort-spill-014');
		expect(trails.map(({ overflow }) => overflow)).toEqual([null]);
	});

	test('is empty where the estimates hold', () => {
		expect(interpret('undersized-memory-004').trails).toEqual([]);
	});

	test('gives ratios of actual to expected, below 1 for too many expected', () => {
		expect(interpret('table-bloat-043').trails[0]?.steps[0]?.ratio).toBeCloseTo(6000 / 900000, 6);
	});
});
