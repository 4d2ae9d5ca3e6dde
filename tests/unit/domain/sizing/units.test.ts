import { describe, expect, test } from 'vitest';
import {
	formatBytes,
	formatKb,
	formatMs,
	formatRows,
	formatTimes,
	readMemoryKb,
	toMemorySetting
} from '$lib/domain/sizing/units';

describe('readMemoryKb', () => {
	// PostgreSQL manual 15, section 20.1.1: units are case-sensitive, 1,024 apart; work_mem without a unit is kB.
	test.each([
		['a few', null],
		['4mb', null],
		['-4MB', null],
		['', null],
		['4MB', 4096],
		['256kB', 256],
		['1GB', 1048576],
		['2TB', 2147483648],
		['4096', 4096],
		["'64 MB'", 65536],
		['1.5GB', 1572864],
		['8192B', 8]
	])('reads %j as %j kB', (setting, kb) => {
		expect(readMemoryKb(setting)).toBe(kb);
	});
});

describe('toMemorySetting', () => {
	test.each([
		[15360, '15MB'],
		[14436.2, '14437kB'],
		[2097152, '2GB'],
		[64, '64kB']
	])('writes %d kB as %s', (kb, setting) => {
		expect(toMemorySetting(kb)).toBe(setting);
		expect(readMemoryKb(toMemorySetting(kb))).toBe(Math.ceil(kb));
	});
});

describe('formatting for people', () => {
	test('gives bytes at most three figures below a thousand', () => {
		expect([0, 512, 8192, 57_802_752, 1_150_000_000].map(formatBytes)).toEqual([
			'0 bytes',
			'512 bytes',
			'8 kB',
			'55.1 MB',
			'1.07 GB'
		]);
		expect(formatKb(1023.4)).toBe('1,023 kB');
	});

	test('groups rows and keeps a fraction of a row', () => {
		expect([450300, 0.33, 1, 12.5, 1200000].map(formatRows)).toEqual([
			'450,300',
			'0.33',
			'1',
			'13',
			'1,200,000'
		]);
	});

	test('moves from milliseconds to seconds to minutes', () => {
		expect([0.42, 12.34, 666.3, 12_400, 200_400].map(formatMs)).toEqual([
			'0.42 ms',
			'12 ms',
			'666 ms',
			'12.4 s',
			'3 min 20 s'
		]);
	});

	test('says how many times', () => {
		expect([5.29, 562.88, 1234.5].map(formatTimes)).toEqual(['5.3 times', '563 times', '1,235 times']);
	});
});
