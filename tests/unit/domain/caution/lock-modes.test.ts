import { describe, expect, it } from 'vitest';
import { blocksOf, conflicts, LOCK_MODES, strengthOf } from '$lib/domain/caution/lock-modes';

describe('conflicts', () => {
	it('is the table of the manual, PostgreSQL 13.3.1, counted row by row', () => {
		const counts = LOCK_MODES.map((held) => LOCK_MODES.filter((wanted) => conflicts(held, wanted)).length);
		expect(counts).toEqual([1, 2, 4, 5, 5, 6, 7, 8]);
	});

	it('holds both ways: whoever keeps another waiting would have to wait for it', () => {
		for (const a of LOCK_MODES) for (const b of LOCK_MODES) expect(conflicts(a, b)).toBe(conflicts(b, a));
	});

	it('lets an ordinary write pass beside ANALYZE and VACUUM but not beside an index build', () => {
		expect(conflicts('ShareUpdateExclusiveLock', 'RowExclusiveLock')).toBe(false);
		expect(conflicts('ShareLock', 'RowExclusiveLock')).toBe(true);
		expect(conflicts('ShareLock', 'ShareLock')).toBe(false);
	});
});

describe('blocksOf', () => {
	it('says that only ACCESS EXCLUSIVE keeps readers waiting (manual, 13.3.1)', () => {
		const modes = LOCK_MODES.filter((mode) => blocksOf([mode]).reads);
		expect(modes).toEqual(['AccessExclusiveLock']);
	});

	it('says that SHARE and everything stronger keeps writers waiting', () => {
		const modes = LOCK_MODES.filter((mode) => blocksOf([mode]).writes);
		expect(modes).toEqual(['ShareLock', 'ShareRowExclusiveLock', 'ExclusiveLock', 'AccessExclusiveLock']);
	});

	it('answers no to everything without a lock', () => {
		expect(blocksOf([])).toEqual({ reads: false, writes: false, schemaChanges: false });
	});
});

describe('strengthOf', () => {
	it('puts ACCESS SHARE lowest and ACCESS EXCLUSIVE highest', () => {
		expect(strengthOf('AccessShareLock')).toBe(0);
		expect(strengthOf('AccessExclusiveLock')).toBe(7);
	});
});
