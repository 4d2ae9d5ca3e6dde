import { describe, expect, it } from 'vitest';
import { isZone, readLocalTime, writeLocalTime } from '../../../../src/lib/domain/incident/local-time';

// Offsets and the days on which they change: IANA time zone database, Europe/Oslo 2026.
describe('readLocalTime', () => {
	it.each(['', 'yesterday', '2026-13-01T01:05', '2026-02-30T01:05', '2026-12-01T24:05'])(
		'answers null for %j',
		(text) => {
			expect(readLocalTime(text, 'Europe/Oslo')).toBeNull();
		}
	);

	it('reads a winter and a summer time in the zone', () => {
		expect(readLocalTime('2026-12-01T01:05', 'Europe/Oslo')).toBe('2026-12-01T00:05:00.000Z');
		expect(readLocalTime('2026-07-01T01:05', 'Europe/Oslo')).toBe('2026-06-30T23:05:00.000Z');
	});

	it('takes the earlier instant of the hour that the clock repeats', () => {
		expect(readLocalTime('2026-10-25T02:30', 'Europe/Oslo')).toBe('2026-10-25T00:30:00.000Z');
	});

	it('goes on after the hour that the clock leaves out', () => {
		expect(readLocalTime('2026-03-29T02:30', 'Europe/Oslo')).toBe('2026-03-29T01:30:00.000Z');
	});
});

describe('writeLocalTime', () => {
	it('is undone by readLocalTime, in zones of odd offsets too', () => {
		for (const zone of ['UTC', 'Asia/Kathmandu', 'America/St_Johns', 'Pacific/Chatham']) {
			const iso = '2026-12-01T01:05:00.000Z';
			expect(readLocalTime(writeLocalTime(iso, zone), zone)).toBe(iso);
		}
	});
});

describe('isZone', () => {
	it('tells a zone from other words', () => {
		expect(isZone('Europe/Oslo')).toBe(true);
		expect(isZone('Northmoor/Quay')).toBe(false);
	});
});
