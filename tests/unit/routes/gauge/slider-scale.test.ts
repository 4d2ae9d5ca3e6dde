import { describe, expect, it } from 'vitest';
import { SLIDER_STEPS, toPosition, toValue } from '../../../../src/routes/(app)/gauge/slider-scale';

const rows = { least: 1, most: 1_000_000 };

describe('toPosition', () => {
	it('puts a value beyond an end at that end, and nonsense at the start', () => {
		expect(toPosition(0, rows)).toBe(0);
		expect(toPosition(Number.NaN, rows)).toBe(0);
		expect(toPosition(5e9, rows)).toBe(SLIDER_STEPS);
	});

	it('gives each decade the same length', () => {
		expect(toPosition(1_000, rows)).toBe(SLIDER_STEPS / 2);
		expect(toPosition(10, rows) * 6).toBeCloseTo(SLIDER_STEPS, -1);
	});
});

describe('toValue', () => {
	it('reaches both ends exactly', () => {
		expect(toValue(0, { least: 64, most: 67_108_864 })).toBe(64);
		expect(toValue(SLIDER_STEPS, { least: 64, most: 67_108_864 })).toBe(67_108_864);
	});

	it('is a whole number of two significant digits between them', () => {
		for (let position = 1; position < SLIDER_STEPS; position++) {
			const value = toValue(position, rows);
			expect(Number.isInteger(value)).toBe(true);
			expect(Number(value.toPrecision(2))).toBe(value);
		}
	});

	it('stays within one step of where the value came from', () => {
		for (const value of [2, 47, 450_300, 999_999])
			expect(toValue(toPosition(value, rows), rows) / value).toBeCloseTo(1, 0);
	});

	it('never falls while the slider moves on', () => {
		let last = 0;
		for (let position = 0; position <= SLIDER_STEPS; position++) {
			const value = toValue(position, rows);
			expect(value).toBeGreaterThanOrEqual(last);
			last = value;
		}
	});
});
