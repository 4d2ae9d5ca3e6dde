/** 0 reads only, 1 one session, 2 loads or slows others, 3 blocks others or cannot be undone. */
export type CautionLevel = 0 | 1 | 2 | 3;

/** What one statement does to production. */
export interface Caution {
	sql: string;
	understood: boolean;
	/** "create-index"; "not-understood" where it is not. */
	kind: string;
	/** Strongest first, in the engine's own names. */
	locks: { mode: string; on: string }[];
	lock: { mode: string; on: string } | null;
	blocks: { reads: boolean; writes: boolean; schemaChanges: boolean };
	rewrites: boolean;
	/** May run in a transaction block. */
	inTransaction: boolean;
	level: CautionLevel;
	/** What a cancelled one leaves behind. */
	cancel: string;
	undo: string;
	load: string;
	/** What to check first. */
	precheck: string[];
	/** The manual and its section. */
	basis: { source: string; section: string } | null;
}
