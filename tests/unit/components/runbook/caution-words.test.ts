import { describe, expect, it } from 'vitest';
import { listFacts, sayWhoWaits } from '$lib/components/runbook/caution-words';
import type { Caution } from '$lib/domain/caution/caution';

const caution: Caution = {
	sql: 'create index concurrently yard_move_cont_at_2 on yard_move (container_no, moved_at)',
	understood: true,
	kind: 'create-index',
	locks: [{ mode: 'ShareUpdateExclusiveLock', on: 'yard_move' }],
	lock: { mode: 'ShareUpdateExclusiveLock', on: 'yard_move' },
	blocks: { reads: false, writes: false, schemaChanges: true },
	rewrites: false,
	inTransaction: false,
	level: 2,
	cancel: 'leaves an invalid index: drop it',
	undo: '',
	load: 'reads the table twice',
	precheck: ['Free disk'],
	basis: null
};

describe('sayWhoWaits', () => {
	it('names every kind of work that stands still', () => {
		expect(sayWhoWaits({ reads: true, writes: true, schemaChanges: true })).toBe('reads and writes wait');
		expect(sayWhoWaits({ reads: false, writes: true, schemaChanges: true })).toBe('writes wait; reads go on');
	});

	it('tells maintenance that waits from nobody waiting', () => {
		expect(sayWhoWaits({ reads: false, writes: false, schemaChanges: true })).toContain('maintenance waits');
		expect(sayWhoWaits({ reads: false, writes: false, schemaChanges: false })).toBe('nobody waits');
	});
});

describe('listFacts', () => {
	it('leaves out what the caution does not say', () => {
		expect(listFacts(caution).map((fact) => fact.name)).toEqual([
			'lock',
			'others',
			'load',
			'cancelled',
			'transaction'
		]);
	});

	it('leaves out the lock that nobody notices and the cancelling that leaves nothing', () => {
		const blocks = { reads: false, writes: false, schemaChanges: false };
		const facts = listFacts({ ...caution, locks: [], lock: null, blocks, cancel: 'Nothing.' });
		expect(facts.map((fact) => fact.name)).toEqual(['others', 'load', 'transaction']);
	});
});
