import { walkOperators } from '$lib/domain/reading/operator';
import { phraseOperator } from '$lib/domain/reading/operator-phrase';
import type { Reading } from '$lib/domain/reading/reading';
import { formatRows } from '$lib/domain/sizing/units';

/** A line of a plan's outline. */
export interface OutlineLine {
	path: string;
	/** How deep it stands, from 0. */
	depth: number;
	/** "hash join on invoice_no" */
	name: string;
	/** "600 expected, 450,300 got"; empty where the evidence holds neither. */
	rows: string;
}

/** Lines that tell one plan from another at a glance. */
const MOST_LINES = 6;

/** The first operators of a plan, as the engine prints them; empty: the reading holds no plan. */
export function outlinePlan({ plan }: Reading): OutlineLine[] {
	if (plan === null) return [];
	const lines: OutlineLine[] = [];
	for (const operator of walkOperators(plan.root)) {
		if (lines.length === MOST_LINES) break;
		const { path, estimatedRows, actualRows } = operator;
		const rows = [
			estimatedRows === null ? null : `${formatRows(estimatedRows)} expected`,
			actualRows === null ? null : `${formatRows(actualRows)} got`
		];
		lines.push({
			path,
			depth: path.split('.').length - 1,
			name: phraseOperator(operator),
			rows: rows.filter((part) => part !== null).join(', ')
		});
	}
	return lines;
}
