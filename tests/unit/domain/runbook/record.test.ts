import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { describeRecord, recordOf, triedOf, wilsonInterval } from '$lib/domain/runbook/record';

describe('wilsonInterval', () => {
	// Newcombe, Statistics in Medicine 17 (1998) 857-872: his four examples, Wilson's score without continuity correction.
	it.each([
		[81, 263, 0.2553, 0.3662],
		[15, 148, 0.0624, 0.1605],
		[0, 20, 0, 0.1611],
		[1, 29, 0.0061, 0.1718]
	])('gives Newcombe’s published bounds for %i of %i', (x, n, low, high) => {
		const interval = wilsonInterval(x, n);
		expect(interval.low).toBeCloseTo(low, 4);
		expect(interval.high).toBeCloseTo(high, 4);
	});

	it('says nothing where nothing was tried', () => {
		expect(wilsonInterval(0, 0)).toEqual({ low: 0, high: 1 });
	});

	it('holds the share itself and stays within 0 and 1', () => {
		fc.assert(
			fc.property(
				fc.integer({ min: 1, max: 5000 }),
				fc.double({ min: 0, max: 1, noNaN: true }),
				(n, share) => {
					const x = Math.round(share * n);
					const { low, high } = wilsonInterval(x, n);
					expect(low).toBeGreaterThanOrEqual(0);
					expect(high).toBeLessThanOrEqual(1);
					expect(low).toBeLessThanOrEqual(x / n + 1e-9);
					expect(high).toBeGreaterThanOrEqual(x / n - 1e-9);
				}
			)
		);
	});
});

describe('recordOf', () => {
	it('counts outcomes and leaves out attempts under way', () => {
		const record = recordOf(['worked', null, 'worked', 'partly', 'made-worse', 'no-effect', null]);
		expect(record).toEqual({ worked: 2, partly: 1, noEffect: 1, madeWorse: 1 });
		expect(triedOf(record)).toBe(5);
	});
});

describe('describeRecord', () => {
	it('shows the interval and not only the ratio', () => {
		expect(describeRecord({ worked: 7, partly: 1, noEffect: 1, madeWorse: 0 })).toBe(
			'worked 7 of 9 (45 to 94 %)'
		);
	});

	it('says that it was not tried', () => {
		expect(describeRecord({ worked: 0, partly: 0, noEffect: 0, madeWorse: 0 })).toBe('not tried yet');
	});
});
