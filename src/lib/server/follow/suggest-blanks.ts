import type { Evidence } from '$lib/domain/incident/incident';
import { walkOperators } from '$lib/domain/reading/operator';
import type { Reading } from '$lib/domain/reading/reading';

/**
 * What an incident's evidence says for the blanks of a runbook's statements: the table where the misestimate
 * begins, else where the heaviest symptom shows. Empty: it names no table.
 */
export function suggestBlanks(evidence: readonly Pick<Evidence, 'readings'>[]): Record<string, string> {
	for (const { readings } of evidence)
		for (const reading of readings) {
			const table = findTable(reading);
			if (table !== null) return { table };
		}
	return {};
}

function findTable({ plan, trails, symptoms }: Reading): string | null {
	if (plan === null) return null;
	const paths = [trails[0]?.steps[0]?.operator, ...symptoms.map((symptom) => symptom.operator)];
	for (const path of paths)
		for (const operator of walkOperators(plan.root))
			if (operator.path === path && operator.relation !== null) return operator.relation;
	return null;
}
