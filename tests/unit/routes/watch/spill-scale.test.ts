import { describe, expect, it } from 'vitest';
import { scaleFor } from '../../../../src/routes/(app)/spill-scale';

const MB = 1024 ** 2;
const GB = 1024 ** 3;

describe('scaleFor', () => {
	it('holds every figure between two round ones', () => {
		expect(scaleFor([50 * MB, 3 * GB]).ticks).toEqual([10 * MB, 100 * MB, GB, 10 * GB]);
	});

	it('is at least one step long, also for nothing and for one figure', () => {
		expect(scaleFor([]).ticks.length).toBeGreaterThan(1);
		expect(scaleFor([GB]).ticks).toEqual([100 * MB, GB]);
	});

	it('keeps what lies beyond an end at that end', () => {
		const scale = scaleFor([50 * MB, 3 * GB]);
		expect(scale.at(0)).toBe(0);
		expect(scale.at(1024 * GB)).toBe(1);
		expect(scale.at(10 * GB)).toBe(1);
	});
});
