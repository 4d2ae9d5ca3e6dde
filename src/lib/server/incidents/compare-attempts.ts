import type { Attempt } from '$lib/domain/incident/attempt';
import type { Evidence } from '$lib/domain/incident/incident';
import { compareReadings, nameComparison, type NamedComparison } from '$lib/domain/reading/compare-readings';
import { choosePlans, type ReadingPair } from '$lib/domain/reading/comparison/choose-readings';
import { readEvidenceById } from '../evidence/evidence-store';

/** The plans that an attempt is judged by, out of the evidence; null while one side is missing or holds no plan. */
function findPlans(
	{ before, after }: Pick<Attempt, 'before' | 'after'>,
	evidence: readonly Evidence[]
): ReadingPair | null {
	if (before === null || after === null) return null;
	const readingsOf = (id: number) => evidence.find((one) => one.id === id)?.readings ?? [];
	return choosePlans(readingsOf(before), readingsOf(after));
}

function compare(attempt: Attempt, evidence: readonly Evidence[]): Attempt {
	const plans = findPlans(attempt, evidence);
	return plans === null ? attempt : { ...attempt, comparison: compareReadings(plans.before, plans.after) };
}

/**
 * Attempts with the comparison of their plans. Worked out when they are read, so that it follows when a reading
 * improves. `evidence`: where it has been read already, that of the incident.
 */
export async function withComparisons(
	attempts: readonly Attempt[],
	evidence: readonly Evidence[] | null = null
): Promise<Attempt[]> {
	const named = attempts.flatMap(({ before, after }) =>
		before === null || after === null ? [] : [before, after]
	);
	const known = evidence ?? (await readEvidenceById([...new Set(named)]));
	return attempts.map((attempt) => compare(attempt, known));
}

/** The comparison of an attempt as it is shown, with the names of what changed; null: there is none. */
export function nameAttempt(attempt: Attempt, evidence: readonly Evidence[]): NamedComparison | null {
	const plans = findPlans(attempt, evidence);
	return plans === null || attempt.comparison === null
		? null
		: nameComparison(attempt.comparison, plans.before, plans.after);
}
