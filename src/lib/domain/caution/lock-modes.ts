/**
 * PostgreSQL's table-level lock modes, weakest first, by the names that `pg_locks` shows, and which of them
 * exclude each other (PostgreSQL manual, 13.3.1 Table-Level Locks, table 13.2).
 */
export const LOCK_MODES = [
	'AccessShareLock',
	'RowShareLock',
	'RowExclusiveLock',
	'ShareUpdateExclusiveLock',
	'ShareLock',
	'ShareRowExclusiveLock',
	'ExclusiveLock',
	'AccessExclusiveLock'
] as const;
export type LockMode = (typeof LOCK_MODES)[number];

/** Each row: what a holder of that mode keeps waiting, in the order of LOCK_MODES. */
const CONFLICTS: Record<LockMode, string> = {
	AccessShareLock: '.......X',
	RowShareLock: '......XX',
	RowExclusiveLock: '....XXXX',
	ShareUpdateExclusiveLock: '...XXXXX',
	ShareLock: '..XX.XXX',
	ShareRowExclusiveLock: '..XXXXXX',
	ExclusiveLock: '.XXXXXXX',
	AccessExclusiveLock: 'XXXXXXXX'
};

/** Whether one who holds `held` keeps one waiting who wants `wanted`. */
export function conflicts(held: LockMode, wanted: LockMode): boolean {
	return CONFLICTS[held][LOCK_MODES.indexOf(wanted)] === 'X';
}

/** Position in LOCK_MODES: higher is stronger. */
export function strengthOf(mode: LockMode): number {
	return LOCK_MODES.indexOf(mode);
}

/** Who waits behind a lock. */
export interface Blocks {
	reads: boolean;
	writes: boolean;
	/** Schema changes and maintenance: ANALYZE, VACUUM, building an index, most of ALTER TABLE. */
	schemaChanges: boolean;
}

/**
 * Who waits behind a holder of these modes. Reads take AccessShareLock, writes RowExclusiveLock; maintenance
 * takes ShareUpdateExclusiveLock up to ShareRowExclusiveLock. What only AccessExclusiveLock would wait for
 * (behind any open SELECT) is not counted here: it holds for every statement.
 */
export function blocksOf(modes: readonly LockMode[]): Blocks {
	const any = (wanted: LockMode) => modes.some((held) => conflicts(held, wanted));
	return {
		reads: any('AccessShareLock'),
		writes: any('RowExclusiveLock'),
		schemaChanges: any('ShareUpdateExclusiveLock') || any('ShareLock') || any('ShareRowExclusiveLock')
	};
}
