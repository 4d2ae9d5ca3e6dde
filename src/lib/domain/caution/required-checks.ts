import type { Caution } from './caution';

/** From this level on a statement is kept back until its caution and its prechecks are ticked. */
const CHECKED_FROM_LEVEL = 2;

/** The first thing to tick: that the caution itself was read. */
export const CAUTION_READ = 'The caution above is read, and now is the time for it';

/**
 * What has to be ticked before the statements of a step may be copied; empty: nothing. A statement that nobody
 * understood counts as a heavy one.
 */
export function listRequiredChecks(cautions: readonly Caution[]): string[] {
	const heavy = cautions.filter((caution) => caution.level >= CHECKED_FROM_LEVEL || !caution.understood);
	if (heavy.length === 0) return [];
	return [...new Set([CAUTION_READ, ...heavy.flatMap((caution) => caution.precheck)])];
}
