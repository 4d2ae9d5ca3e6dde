import { walkOperators } from '../reading/operator';
import type { Plan } from '../reading/reading';
import { readMajorVersion } from '../sizing/layout';

const BY_FRACTIONS = 18;

/** Major version of the server: as named, else 18 where the plan prints what only 18 and newer print, else null. */
export function guessMajorVersion(plan: Plan): number | null {
	const named = readMajorVersion(plan.engineVersion);
	if (named !== null) return named;
	if (plan.leastMajorVersion !== null) return plan.leastMajorVersion;
	for (const { facts } of walkOperators(plan.root)) {
		// "Storage" and fractions of rows came with 18 (release notes).
		if (facts.storage !== null) return BY_FRACTIONS;
		if (facts.actualRowsPerLoop !== null && !Number.isInteger(facts.actualRowsPerLoop)) return BY_FRACTIONS;
	}
	return null;
}
