import { describe, expect, it } from 'vitest';
import type { Caution } from '$lib/domain/caution/caution';
import { CAUTION_READ, listRequiredChecks } from '$lib/domain/caution/required-checks';

function makeCaution(given: Partial<Caution>): Caution {
	return {
		sql: 'analyze yard_move',
		understood: true,
		kind: 'analyze',
		locks: [],
		lock: null,
		blocks: { reads: false, writes: false, schemaChanges: false },
		rewrites: false,
		inTransaction: true,
		level: 1,
		cancel: '',
		undo: '',
		load: '',
		precheck: ['Free disk'],
		basis: null,
		...given
	};
}

// Levels and what follows from them: common practice, no source.
describe('listRequiredChecks', () => {
	it('asks for nothing before statements that touch one session at most', () => {
		expect(listRequiredChecks([makeCaution({ level: 0 }), makeCaution({ level: 1 })])).toEqual([]);
	});

	it('asks for the caution and its prechecks from level 2 on', () => {
		expect(listRequiredChecks([makeCaution({ level: 2 })])).toEqual([CAUTION_READ, 'Free disk']);
		expect(listRequiredChecks([makeCaution({ level: 3, precheck: [] })])).toEqual([CAUTION_READ]);
	});

	it('asks before a statement that is not understood, whatever its level', () => {
		expect(listRequiredChecks([makeCaution({ level: 0, understood: false, precheck: [] })])).toEqual([
			CAUTION_READ
		]);
	});

	it('asks once for a precheck that two statements share, and not for those of light ones', () => {
		const checks = listRequiredChecks([
			makeCaution({ level: 2 }),
			makeCaution({ level: 3, precheck: ['Free disk', 'Change control knows'] }),
			makeCaution({ level: 1, precheck: ['Somebody is watching'] })
		]);
		expect(checks).toEqual([CAUTION_READ, 'Free disk', 'Change control knows']);
	});
});
