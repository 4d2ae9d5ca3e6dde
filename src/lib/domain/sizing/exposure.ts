/**
 * What a setting would cost in the worst case if every session used all of it at once: an exposure, not a forecast,
 * because peaks rarely coincide (manual, "Resource Consumption": several operations and sessions may each use work_mem).
 */
export interface ExposureInput {
	/** The setting (PostgreSQL: work_mem), kB. */
	settingKb: number;
	/** Sessions running such a statement at the same time. */
	sessions: number;
	/** Hashing operators in one statement: joins and aggregates. */
	hashNodes: number;
	/** Sorting and storing operators in one statement. */
	otherNodes: number;
	hashMemMultiplier: number;
	/** Parallel workers of one statement; each has an allowance of its own, as the leader has. */
	workers: number;
}

/** kB if all sessions peak at once: (hash nodes × multiplier + other nodes) × setting × (workers + 1) × sessions. */
export function exposureKb(input: ExposureInput): number {
	const allowances = input.hashNodes * input.hashMemMultiplier + input.otherNodes;
	return allowances * input.settingKb * (input.workers + 1) * input.sessions;
}
