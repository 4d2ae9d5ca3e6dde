import type { CautionLevel } from '../caution';

/**
 * A statement kind as an engine's table holds it. Texts may name `{table}`, `{index}`, `{view}`, `{setting}`
 * and so on: put in where the statement says them.
 */
export interface StatementRule<Mode extends string, Thing extends string, Check extends string> {
	/** Lock modes, each with the thing that it is taken on. */
	locks: readonly (readonly [Mode, Thing])[];
	/** Of the statement apart from its locks: one that blocks reads or writes is always 3. */
	level: CautionLevel;
	/** Writes a full new copy of a table or an index. */
	rewrites: boolean;
	inTransaction: boolean;
	/** What a cancelled one leaves behind. */
	cancel: string;
	undo: string;
	load: string;
	precheck: readonly Check[];
	/** Where the manual says so. */
	section: string;
}
