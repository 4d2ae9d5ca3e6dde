import { walkOperators, type PlanOperator } from '../../operator';

/** PostgreSQL manual, "Resource Consumption": work_mem is 4MB unless set. */
const WORK_MEM_DEFAULT_KB = 4096;
/** PostgreSQL 15 release notes: hash_mem_multiplier 2.0 by default; 1.0 before. */
const HASH_MEM_MULTIPLIER_DEFAULT = 2;

/** The largest value that the server takes for work_mem (guc_tables.c, MAX_KILOBYTES). */
const MOST_KB = 2_147_483_647;

const PLAIN = new Set([
	'sort',
	'incremental-sort',
	'group-aggregate',
	'window',
	'materialize',
	'cte-scan',
	'function-scan',
	'bitmap-scan'
]);
const HASHED = new Set(['hash-build', 'hash-aggregate', 'memoize']);

/**
 * Fills in what the engine allows each operator. Settings list only what differs from the built-in default, so a
 * plan with them tells the limit even where work_mem is not among them; without them it is not known.
 */
export function fillMemoryLimits(
	root: PlanOperator,
	settings: Record<string, string> | null,
	newestMajor: number | null
): void {
	const workMemKb = workMemOf(settings);
	if (workMemKb === null) return;
	const multiplier = multiplierOf(root, settings ?? {}, workMemKb, newestMajor);
	for (const operator of walkOperators(root)) {
		if (PLAIN.has(operator.kind)) operator.memoryLimitKb = workMemKb;
		else if (HASHED.has(operator.kind) || operator.name.startsWith('HashSetOp')) {
			operator.memoryLimitKb = Math.round(workMemKb * multiplier);
		}
	}
}

function workMemOf(settings: Record<string, string> | null): number | null {
	if (settings === null) return null;
	const set = settings['work_mem'];
	return set === undefined ? WORK_MEM_DEFAULT_KB : memorySettingKb(set);
}

/** A memory setting in kB: "256kB", "4MB", "1GB"; a bare number is in kB (the unit of work_mem). */
export function memorySettingKb(text: string): number | null {
	const match = /^\s*(\d+(?:\.\d+)?)\s*(B|kB|MB|GB|TB)?\s*$/i.exec(text);
	if (match === null) return null;
	const units: Record<string, number> = { b: 1 / 1024, kb: 1, mb: 1024, gb: 1024 ** 2, tb: 1024 ** 3 };
	const kb = Math.round(Number(match[1]) * (units[(match[2] ?? 'kB').toLowerCase()] ?? 1));
	return kb <= MOST_KB ? kb : null;
}

function multiplierOf(
	root: PlanOperator,
	settings: Record<string, string>,
	workMemKb: number,
	newestMajor: number | null
): number {
	const set = Number(settings['hash_mem_multiplier']);
	// The server takes 1 to 1000 (manual, "hash_mem_multiplier").
	if (set >= 1 && set <= 1000) return set;
	if (newestMajor !== null && newestMajor < 15) return 1;
	// Before 15 the default was 1.0, and a plan seldom names its version. A hash table that had to split while it
	// was built stood at its limit when it did, so its peak tells which default it ran under.
	for (const { facts } of walkOperators(root)) {
		const { hash } = facts;
		if (hash === null || facts.parallelAware || hash.peakKb === null) continue;
		const grown = (hash.batches ?? 1) > (hash.plannedBatches ?? 1);
		if (grown && hash.peakKb > workMemKb * 0.8 && hash.peakKb <= workMemKb * 1.02) return 1;
	}
	return HASH_MEM_MULTIPLIER_DEFAULT;
}
