import { phraseOperator } from '$lib/domain/reading/operator-phrase';
import type { Overflow } from '$lib/domain/watch/watch';
import type { SpillRow } from './watch-store';

/**
 * Where an incident overflows, by the heaviest of its plans; how much by that plan, else by its logs.
 * The two are not added: a log and a plan of one night speak of the same files. Null: nothing overflowed.
 */
export function findOverflow(spills: readonly SpillRow[]): Overflow | null {
	const plan = heaviest(spills, (spill) => spill.planBytes);
	const log = heaviest(spills, (spill) => spill.logBytes);
	const temporaryBytes = plan?.planBytes ?? log?.logBytes ?? null;
	if (temporaryBytes === null) return null;
	return { where: plan === null ? null : nameOperator(plan), temporaryBytes, files: log?.files ?? null };
}

function nameOperator({ kind, name, relation, alias, condition }: SpillRow): string | null {
	if (kind === null || name === null) return null;
	return phraseOperator({ kind, name, relation, alias, condition, children: [] });
}

/** The row with the largest figure above 0; null where no row has one. */
function heaviest(spills: readonly SpillRow[], figure: (spill: SpillRow) => number | null): SpillRow | null {
	let most: SpillRow | null = null;
	for (const spill of spills)
		if ((figure(spill) ?? 0) > (most === null ? 0 : (figure(most) ?? 0))) most = spill;
	return most;
}
