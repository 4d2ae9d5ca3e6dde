import type { Reading } from '../reading';

/** The two readings, out of all that two pieces of evidence hold, that tell most beside each other. */
export interface ReadingPair {
	before: Reading;
	after: Reading;
}

/** The heaviest symptom of a reading. */
function weightOf({ symptoms }: Reading): number {
	return symptoms[0]?.weight ?? 0;
}

function heaviest(readings: readonly Reading[]): Reading | undefined {
	return readings.toSorted((one, other) => weightOf(other) - weightOf(one))[0];
}

/**
 * The plans to be compared, out of all readings of two pieces of evidence (a log may hold many): two of one
 * statement where there are such, the heaviest before first; else the heaviest of each. null: one side holds no plan.
 */
export function choosePlans(before: readonly Reading[], after: readonly Reading[]): ReadingPair | null {
	const [plansBefore, plansAfter] = [before, after].map((readings) =>
		readings.filter(({ plan }) => plan !== null)
	);
	if (plansBefore === undefined || plansAfter === undefined) return null;
	const byStatement = new Map<string, Reading>();
	for (const plan of plansAfter) {
		const print = plan.statement?.fingerprint;
		if (print !== undefined && !byStatement.has(print)) byStatement.set(print, plan);
	}
	const known = plansBefore.filter(({ statement }) => byStatement.has(statement?.fingerprint ?? ''));
	const first = heaviest(known) ?? heaviest(plansBefore);
	const second = byStatement.get(first?.statement?.fingerprint ?? '') ?? heaviest(plansAfter);
	return first === undefined || second === undefined ? null : { before: first, after: second };
}

/** As choosePlans; where one side holds no plan, the first reading of each. null: one side has no reading at all. */
export function chooseReadings(before: readonly Reading[], after: readonly Reading[]): ReadingPair | null {
	const plans = choosePlans(before, after);
	if (plans !== null) return plans;
	const [first] = before;
	const [second] = after;
	return first === undefined || second === undefined ? null : { before: first, after: second };
}
