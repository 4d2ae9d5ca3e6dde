import { describe, expect, test } from 'vitest';
import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import { sizingInput, type SizingInput } from '$lib/domain/sizing/sizing';

const hash: SizingInput = {
	kind: 'hash',
	rows: 200000,
	width: 59,
	memoryKb: 4096,
	hashMemMultiplier: 2,
	engine: 'postgresql',
	engineVersion: '15.18'
};

describe('sizingInput', () => {
	test.each([
		[{ ...hash, rows: 0 }],
		[{ ...hash, memoryKb: -1 }],
		[{ ...hash, kind: 'join' }],
		[{ ...hash, sessions: 1.5 }],
		[{ kind: 'sort', rows: 10, width: 4 }]
	])('refuses %j', (input) => {
		expect(sizingInput.safeParse(input).success).toBe(false);
	});
});

describe('computeSizing', () => {
	test('says what a real server did at the present setting, and what would have been enough', () => {
		// 15.18 at 4 MB × 2: 4 batches; at 16 MB × 2: one.
		const sizing = computeSizing(hash);
		expect(sizing.batches).toBe(4);
		expect(sizing.setting.name).toBe('work_mem');
		expect(sizing.setting.valueKb).toBeGreaterThan(8192);
		expect(sizing.setting.valueKb).toBeLessThan(16384);
		expect(computeSizing({ ...hash, memoryKb: sizing.setting.valueKb }).batches).toBe(1);
		expect(computeSizing({ ...hash, memoryKb: sizing.setting.valueKb - 1 }).batches).toBeGreaterThan(1);
	});

	test('tables a quarter, a half, one, two and four times the setting', () => {
		const { table } = computeSizing(hash);
		expect(table.map((row) => row.settingKb)).toEqual([1024, 2048, 4096, 8192, 16384]);
		expect(table.map((row) => row.batches)).toEqual([16, 8, 4, 2, 1]);
		expect(table.at(-1)?.temporaryBytes).toBe(0);
	});

	test('multiplies the exposure over sessions, operators, processes and the hash multiplier', () => {
		// Manual, "Resource Consumption": 4 MB × 2.0 × 3 hash nodes × (2 + 1) processes × 50 sessions.
		const { exposureKb } = computeSizing({ ...hash, sessions: 50, nodes: 3, workers: 2 });
		expect(exposureKb).toBe(4096 * 2 * 3 * 3 * 50);
		expect(computeSizing({ ...hash, kind: 'sort', sessions: 50 }).exposureKb).toBe(4096 * 50);
	});

	test('takes a multiplier of 1.0 before 15 and 2.0 from 15 on', () => {
		const { hashMemMultiplier: _given, ...bare } = hash;
		const older = computeSizing({ ...bare, engineVersion: '14.9' });
		const newer = computeSizing({ ...bare, engineVersion: '16.1' });
		expect(older.setting.valueKb / newer.setting.valueKb).toBeCloseTo(2, 1);
	});

	test('gives a sort passes and no batches, and an aggregate batches and no passes', () => {
		const sort = computeSizing({ ...hash, kind: 'sort', memoryKb: 1024 });
		expect(sort).toMatchObject({ batches: null, passes: 2 });
		expect(sort.temporaryBytes).toBeGreaterThan(27_000_000);
		const aggregate = computeSizing({ ...hash, kind: 'aggregate', memoryKb: 1024 });
		expect(aggregate.passes).toBeNull();
		expect(aggregate.batches).toBeGreaterThan(1);
	});

	test('marks what it says of other engines as the textbook bound', () => {
		const sizing = computeSizing({ ...hash, engine: 'mariadb', kind: 'sort' });
		expect(sizing.setting.name).toBe('sort_buffer_size');
		expect(sizing.formula).toMatch(/^Textbook bound/);
	});

	test('never goes below the least setting that the server takes', () => {
		expect(computeSizing({ ...hash, rows: 1, width: 4 }).setting.valueKb).toBe(64);
	});
});
