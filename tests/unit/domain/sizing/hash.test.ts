import { describe, expect, test } from 'vitest';
import {
	chooseHashTable,
	hashNeededKb,
	hashTemporaryBytes,
	hashWorkMemKb,
	type HashInput
} from '$lib/domain/sizing/hash';
import { postgresLayout } from '$lib/domain/sizing/layout';

const pg15 = postgresLayout(15);
const pg18Small = postgresLayout(18, 4);

function hash(
	workMemKb: number,
	hashMemMultiplier: number,
	rows: number,
	widthBytes: number,
	participants = 1
): HashInput {
	return { workMemKb, hashMemMultiplier, rows, widthBytes, participants, skewPossible: true };
}

// Runs on PostgreSQL 15.18, 64-bit: work_mem kB, multiplier, planned rows, width → buckets, batches as EXPLAIN printed them.
const RUNS_15: [number, number, number, number, number, number][] = [
	[1024, 2, 200000, 59, 32768, 16],
	[512, 4, 200000, 59, 32768, 16],
	[1024, 2, 200000, 4, 65536, 8],
	[512, 4, 200000, 4, 65536, 8],
	[1024, 2, 59375, 8, 65536, 2],
	[512, 4, 59375, 8, 65536, 2],
	[4096, 2, 200000, 59, 131072, 4],
	[4096, 2, 200000, 4, 262144, 2],
	[4096, 2, 59375, 8, 65536, 1],
	[64, 2, 200000, 59, 2048, 256],
	[64, 2, 200000, 4, 4096, 128],
	[64, 2, 59375, 8, 4096, 32],
	[4096, 1, 200000, 59, 65536, 8],
	[4096, 1, 200000, 4, 131072, 4],
	[4096, 1, 59375, 8, 65536, 1],
	[16384, 2, 200000, 59, 262144, 1],
	[16384, 2, 200000, 4, 262144, 1],
	[256, 2, 22222, 4, 16384, 4]
];

// Runs on an 18.7 WASM build (32-bit): 200,000 rows of width 59.
const RUNS_18: [number, number, number][] = [
	[64, 2, 32],
	[64, 1, 32],
	[256, 2, 32],
	[1024, 2, 16]
];

describe('chooseHashTable', () => {
	test.each(RUNS_15)(
		'plans as 15.18 did at %d kB × %d for %d rows of %d bytes',
		(workMemKb, multiplier, rows, width, buckets, batches) => {
			expect(chooseHashTable(pg15, hash(workMemKb, multiplier, rows, width))).toMatchObject({
				buckets,
				batches
			});
		}
	);

	test.each(RUNS_18)(
		'plans as 18.7 (32-bit) did at %d kB × %d: %d batches',
		(workMemKb, multiplier, batches) => {
			expect(chooseHashTable(pg18Small, hash(workMemKb, multiplier, 200000, 59)).batches).toBe(batches);
		}
	);

	test('takes 16384 buckets and more memory than hash_mem where 18 halves the batches', () => {
		const plan = chooseHashTable(pg18Small, hash(64, 2, 200000, 59));
		expect(plan.buckets).toBe(16384);
		expect(plan.spaceBytes).toBeGreaterThan(64 * 2 * 1024);
		expect(chooseHashTable(postgresLayout(15, 4), hash(64, 2, 200000, 59)).batches).toBe(256);
	});

	test('combines the allowances of all participants for one shared table', () => {
		const alone = chooseHashTable(pg15, hash(7008, 2, 600000, 20));
		const shared = chooseHashTable(pg15, hash(7008, 2, 600000, 20, 3));
		expect(alone.batches).toBeGreaterThan(1);
		expect(shared).toMatchObject({ batches: 1, combined: true });
	});

	test('goes back to one allowance where the combined one is not enough', () => {
		// Parallel hash on 15.18: 3 MB × 2, three processes, 600,000 rows of width 20: 131072 buckets, 8 batches.
		expect(chooseHashTable(pg15, hash(3072, 2, 600000, 20, 3))).toMatchObject({
			buckets: 131072,
			batches: 8
		});
	});

	test('guesses a thousand rows where the planner has none', () => {
		expect(chooseHashTable(pg15, hash(4096, 2, 0, 8))).toMatchObject({ buckets: 1024, batches: 1 });
	});
});

describe('hashNeededKb', () => {
	test('agrees with the peak that 15.18 printed for one batch', () => {
		// 200,000 rows of (int, int, 50 characters): t_len 75, 16 + 75 each, 262,144 buckets: 19,822 kB printed.
		// The planner's own figure rounds the width up and so lies a little above.
		expect(hashNeededKb(pg15, 200000, 59)).toBeGreaterThan(19822);
		expect(hashNeededKb(pg15, 200000, 59)).toBeLessThan(19822 * 1.06);
	});
});

describe('hashWorkMemKb', () => {
	const cases: [number, number, number, number][] = [
		[200000, 59, 2, 1],
		[300000, 12, 2, 1],
		[42000, 15, 2, 1],
		[286617, 10, 1, 1],
		[600000, 20, 2, 3],
		[500, 4, 2, 1]
	];
	test.each(cases)(
		'finds the edge for %d rows of %d bytes (× %d, %d processes)',
		(rows, width, multiplier, processes) => {
			const { workMemKb: _any, ...input } = hash(0, multiplier, rows, width, processes);
			const edge = hashWorkMemKb(pg15, input);
			expect(chooseHashTable(pg15, { ...input, workMemKb: edge }).batches).toBe(1);
			if (edge > 64)
				expect(chooseHashTable(pg15, { ...input, workMemKb: edge - 1 }).batches).toBeGreaterThan(1);
		}
	);

	test('lies between the settings at which a real server still spilled and no longer spilled', () => {
		// Bisected on 15.18 by work_mem: 300,000 rows of width 12 (9,216 spills, 9,344 does not); 1,200,000 of 12.
		const at = (rows: number, widthBytes: number) =>
			hashWorkMemKb(pg15, { rows, widthBytes, hashMemMultiplier: 2, participants: 1, skewPossible: true });
		expect(at(300000, 12)).toBeGreaterThan(9216);
		expect(at(300000, 12)).toBeLessThanOrEqual(9344);
		expect(at(1200000, 12)).toBeGreaterThan(36864);
		expect(at(1200000, 12)).toBeLessThanOrEqual(37376);
	});
});

describe('hashTemporaryBytes', () => {
	test('agrees with the blocks that 15.18 wrote', () => {
		// 16 batches, 200,000 rows of 79 bytes and 300,000 of 28: 1,808 + 961 blocks reckoned; 1,799 + 983 written.
		const build = hashTemporaryBytes(pg15, 16, 200000, 59) / 8192;
		const probe = hashTemporaryBytes(pg15, 16, 300000, 8) / 8192;
		expect(Math.abs(build / 1799 - 1)).toBeLessThan(0.03);
		expect(Math.abs(probe / 983 - 1)).toBeLessThan(0.03);
	});

	test('is nothing for one batch', () => {
		expect(hashTemporaryBytes(pg15, 1, 200000, 59)).toBe(0);
	});
});
