import { describe, expect, it } from 'vitest';
import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import { makeOverflowingReading, makeReading } from '../../../fixtures/factories/reading';
import { listStarts } from '../../../../src/routes/(app)/gauge/start-sizing';

describe('listStarts', () => {
	it('has nothing to size in a log, or in a plan that does not overflow', () => {
		expect(listStarts(makeReading({ kind: 'log' }))).toEqual([]);
		expect(listStarts({ ...makeOverflowingReading(), sizing: [] })).toEqual([]);
	});

	it('puts the greatest need first and names the operator', () => {
		expect(listStarts(makeOverflowingReading()).map((start) => start.label)).toEqual([
			'sort by currency, charge_code, 34.5 MB needed',
			'hash join on invoice_no, 28 MB needed'
		]);
	});

	it('takes the rows of the side that is hashed, and the setting as the plan prints it', () => {
		const hash = listStarts(makeOverflowingReading()).find((start) => start.input.kind === 'hash');
		expect(hash?.input).toMatchObject({ rows: 450300, memoryKb: 4096, hashMemMultiplier: 2 });
	});

	it('works back from what was given where the plan does not print the setting', () => {
		const reading = makeOverflowingReading();
		if (reading.plan !== null) reading.plan.settings = {};
		const starts = listStarts(reading);
		expect(starts.find((start) => start.input.kind === 'hash')?.input.memoryKb).toBe(4096);
		expect(starts.find((start) => start.input.kind === 'sort')?.input.memoryKb).toBe(4096);
	});

	// A setting below what the reading found would overflow again (the rows on disk were wider than planned).
	it('never starts from figures that need less than the reading found', () => {
		const reading = makeOverflowingReading();
		const found = reading.sizing.map(({ operator, setting }) => ({
			path: operator,
			valueKb: setting.valueKb
		}));
		for (const { path, input } of listStarts(reading)) {
			const needed = found.find((one) => one.path === path)?.valueKb ?? Infinity;
			expect(computeSizing(input).setting.valueKb).toBeGreaterThanOrEqual(needed);
			expect(computeSizing({ ...input, width: input.width - 1 }).setting.valueKb).toBeLessThan(needed * 1.2);
		}
	});
});
