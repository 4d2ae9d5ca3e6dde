import type { PlanOperator } from '../../reading/operator';
import { inspectSide, splitComparison, splitComparisons, tokenise } from '../expressions';

/** What an operator's conditions ask of its columns. */
export interface Predicates {
	/** Columns compared for equality as they are. */
	equal: string[];
	/** Columns compared in another way (ranges, LIKE) as they are. */
	other: string[];
	/** Comparisons of a function, a cast, arithmetic or a JSON member of a column: the planner has no statistics of those. */
	wrapped: string[];
}

/** Casts that do not change what the planner knows of a column. */
const HARMLESS_CASTS = new Set(['text', 'bpchar', 'character varying', 'varchar']);

/** The predicates of a scan's filter and index condition, each column once. */
export function readPredicates({ facts }: PlanOperator): Predicates {
	const found: Predicates = { equal: [], other: [], wrapped: [] };
	for (const condition of [facts.indexCondition ?? facts.recheckCondition, facts.filter]) {
		if (condition === null) continue;
		for (const comparison of splitComparisons(tokenise(condition))) {
			const sides = splitComparison(comparison);
			if (sides === null) continue;
			for (const tokens of [sides.left, sides.right]) {
				const side = inspectSide(tokens);
				const column = side.columns[0];
				if (column === undefined) continue;
				const wrapped =
					side.functions.length > 0 ||
					side.arithmetic ||
					side.json ||
					side.casts.some((type) => !HARMLESS_CASTS.has(type));
				const list = wrapped ? found.wrapped : sides.operator === '=' ? found.equal : found.other;
				if (!list.includes(column)) list.push(column);
				break;
			}
		}
	}
	return found;
}

/** All columns that the predicates name. */
export function columnsOf({ equal, other, wrapped }: Predicates): string[] {
	return [...new Set([...equal, ...other, ...wrapped])];
}
