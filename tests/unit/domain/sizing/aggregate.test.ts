import { describe, expect, test } from 'vitest';
import {
	aggregateNeededKb,
	groupBytes,
	INTEGER_STATE,
	NUMERIC_STATE,
	plannedEntryBytes,
	plannedPartitions
} from '$lib/domain/sizing/aggregate';
import { guessGroupShape } from '$lib/domain/sizing/aggregate-states';
import { postgresLayout } from '$lib/domain/sizing/layout';

const pg15 = postgresLayout(15);

describe('plannedPartitions', () => {
	// 15.18, 200,000 groups, input width 32: planned partitions for work_mem × multiplier.
	test.each([
		[64, 2, 4],
		[1024, 2, 16],
		[4096, 2, 4],
		[4096, 1, 8]
	])('plans as 15.18 did at %d kB × %d: %d', (workMemKb, multiplier, partitions) => {
		expect(plannedPartitions(200000, plannedEntryBytes(pg15, 32), workMemKb * multiplier)).toBe(partitions);
	});

	test('plans none where all groups are expected to fit', () => {
		expect(plannedPartitions(1000, plannedEntryBytes(pg15, 32), 4096)).toBe(0);
	});
});

describe('aggregateNeededKb', () => {
	// 15.18, "Peak Memory Usage" of aggregates that stayed in memory: [groups, shape, printed kB].
	test.each([
		['count(*), min and max of a timestamp', 259029, { keyBytes: 12, transitions: 3, states: [] }, 2, 45073],
		[
			'count(*) and a numeric sum',
			181970,
			{ keyBytes: 12, transitions: 2, states: [NUMERIC_STATE] },
			2,
			84001
		],
		[
			'count(*) and a numeric average',
			311693,
			{ keyBytes: 15, transitions: 2, states: [NUMERIC_STATE] },
			1,
			151569
		],
		['count(*) alone', 209705, { keyBytes: 12, transitions: 1, states: [] }, 2, 29201]
	])('comes within 1 %% of the peak printed for %s', (_what, groups, shape, multiplier, printedKb) => {
		const kb = aggregateNeededKb(pg15, groups, shape, multiplier);
		expect(Math.abs(kb / printedKb - 1)).toBeLessThan(0.01);
	});
});

describe('groupBytes', () => {
	test('drops the chunk headers of tuple and values from 17 on', () => {
		const shape = { keyBytes: 12, transitions: 1, states: [] };
		expect(groupBytes(pg15, shape)).toBe(80);
		expect(groupBytes(postgresLayout(18), shape)).toBe(32 + 16);
	});
});

describe('guessGroupShape', () => {
	test('leaves room for two results where the output is 8 bytes wider than the key', () => {
		expect(guessGroupShape({ inputBytes: 12, outputBytes: 20, keys: 1 })).toEqual({
			keyBytes: 12,
			transitions: 2,
			states: []
		});
	});

	test('reads no aggregate at all from DISTINCT', () => {
		expect(guessGroupShape({ inputBytes: 10, outputBytes: 10, keys: 1 })).toMatchObject({
			keyBytes: 10,
			transitions: 0
		});
	});

	test('reads several by-value results where the input carries an argument', () => {
		expect(guessGroupShape({ inputBytes: 20, outputBytes: 36, keys: 1 }).transitions).toBe(3);
	});

	test('reads a numeric result from 32 bytes of output over a numeric argument', () => {
		expect(guessGroupShape({ inputBytes: 15, outputBytes: 49, keys: 2 }).states).toEqual([NUMERIC_STATE]);
	});

	test('reads an integer average from 32 bytes of output over an integer argument', () => {
		expect(guessGroupShape({ inputBytes: 16, outputBytes: 40, keys: 1 }).states).toEqual([INTEGER_STATE]);
	});

	test('falls back to one by-value aggregate where nothing explains the widths', () => {
		expect(guessGroupShape({ inputBytes: 4, outputBytes: 4, keys: 9 })).toMatchObject({
			transitions: 1,
			states: []
		});
	});
});
