import { describe, expect, it } from 'vitest';
import { startOfWeek, startOfWeeks, sumSpillWeeks } from '$lib/domain/watch/spill-weeks';

// 2026-12-01 is a Tuesday (ISO 8601 week 49, which begins on Monday 2026-11-30).
const tuesday = new Date('2026-12-01T02:14:00Z');

describe('startOfWeek', () => {
	it('is the Monday of the week, at midnight UTC', () => {
		expect(new Date(startOfWeek(tuesday)).toISOString()).toBe('2026-11-30T00:00:00.000Z');
	});

	it('counts Sunday to the week that it ends', () => {
		expect(new Date(startOfWeek(new Date('2026-12-06T23:59:59Z'))).toISOString()).toBe(
			'2026-11-30T00:00:00.000Z'
		);
	});

	it('counts the first second of Monday to the new week', () => {
		expect(new Date(startOfWeek(new Date('2026-12-07T00:00:00Z'))).toISOString()).toBe(
			'2026-12-07T00:00:00.000Z'
		);
	});
});

describe('sumSpillWeeks', () => {
	it('leaves out what happened before the first week or after the last', () => {
		const logs = [
			{ at: '2026-11-22T23:59:59Z', temporaryBytes: 1 },
			{ at: '2026-12-07T00:00:00Z', temporaryBytes: 2 },
			{ at: 'not a time', temporaryBytes: 4 }
		];
		expect(sumSpillWeeks(logs, tuesday, 2).map((week) => week.temporaryBytes)).toEqual([null, null]);
	});

	it('sums the logs of a week and counts them', () => {
		const logs = [
			{ at: '2026-11-23T00:00:00Z', temporaryBytes: 100 },
			{ at: '2026-11-29T23:00:00Z', temporaryBytes: 50 },
			{ at: '2026-11-30T00:00:00Z', temporaryBytes: 7 }
		];
		expect(sumSpillWeeks(logs, tuesday, 2)).toEqual([
			{ from: '2026-11-23', temporaryBytes: 150, logs: 2 },
			{ from: '2026-11-30', temporaryBytes: 7, logs: 1 }
		]);
	});

	it('tells a week whose logs spilled nothing from one without a log', () => {
		const [before, current] = sumSpillWeeks([{ at: '2026-12-01T00:00:00Z', temporaryBytes: 0 }], tuesday, 2);
		expect(before?.temporaryBytes).toBeNull();
		expect(current?.temporaryBytes).toBe(0);
	});

	it('begins where startOfWeeks says', () => {
		expect(startOfWeeks(tuesday, 12)).toBe('2026-09-14T00:00:00.000Z');
		expect(sumSpillWeeks([], tuesday, 12)[0]?.from).toBe('2026-09-14');
	});
});
