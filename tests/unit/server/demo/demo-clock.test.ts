import { describe, expect, it } from 'vitest';
import { clockOf, moveStamps } from '$lib/server/demo/demo-clock';

const NOW = new Date('2026-12-01T02:00:00.000Z');

describe('clockOf', () => {
	it('counts from the incident’s own start, whatever its zone', () => {
		const clock = clockOf({ startedAt: '2025-02-01T00:40:00+01:00' }, NOW);
		expect(clock.at(25)).toBe('2025-02-01T00:05:00.000Z');
	});

	it('counts back from the moment of filling where the incident is under way', () => {
		expect(clockOf({ startedMinutesAgo: 90 }, NOW).startedAt).toBe('2026-12-01T00:30:00.000Z');
	});
});

describe('moveStamps', () => {
	it('moves every stamp of a log, over the end of a month too, and nothing else', () => {
		const line = "2025-01-31 23:59:30.123 UTC [42] LOG:  temporary file, date '2025-01-31'";
		expect(moveStamps(line, '2025-01-31T23:00:00Z', '2026-11-30T23:01:00Z')).toBe(
			"2026-12-01 00:00:30.123 UTC [42] LOG:  temporary file, date '2025-01-31'"
		);
	});

	it('leaves alone what only looks like a stamp', () => {
		expect(moveStamps('2025-19-41 23:59:61', '2025-01-01T00:00:00Z', '2025-01-02T00:00:00Z')).toBe(
			'2025-19-41 23:59:61'
		);
	});
});
