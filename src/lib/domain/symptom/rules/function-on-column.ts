import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatRows } from '../../sizing/units';
import { inspectSide, splitComparison, splitComparisons, tokenise, type SideFindings } from '../expressions';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighRows } from '../weight';
import { readDiscard } from './filter-discards-most';

export const LEAST_REMOVED: Threshold = {
	name: 'rows thrown away by the condition',
	value: 10_000,
	unit: 'rows',
	why: 'Below, the scan costs little, whether an index could serve the condition or not.'
};
export const LEAST_REMOVED_SHARE: Threshold = {
	name: 'share thrown away by the condition',
	value: 0.9,
	unit: 'share',
	why: 'A condition that keeps more than a tenth would mostly be scanned with a bare column too.'
};

/** Casts that PostgreSQL prints for varchar and char columns on every comparison and that no index minds. */
const HARMLESS_CASTS = new Set(['text', 'bpchar', 'character varying', 'varchar', 'citext']);

/** Selectivity of "expression = constant" without statistics: 1 / 200 (DEFAULT_NUM_DISTINCT, selfuncs.h). */
const GUESSED_SHARE = 0.005;
/** How far the rows expected may be from that share of the rows read (they are counted at another time). */
const GUESS_TOLERANCE = 0.1;
/** An error this large beside the guessed share tells a cast number from a text column with 200 values. */
const LEAST_GUESS_ERROR = 10;

/** What wraps the column of a scan's filter: "lower", "cast to numeric", "arithmetic"; null: nothing that matters. */
export function findWrapping(operator: PlanOperator): string | null {
	const { filter } = operator.facts;
	if (filter === null) return null;
	const castGuess = isGuessedForCast(operator);
	for (const comparison of splitComparisons(tokenise(filter))) {
		const sides = splitComparison(comparison);
		if (sides === null) continue;
		for (const side of [sides.left, sides.right]) {
			const findings = inspectSide(side);
			const found = namesOwnColumn(findings, operator) ? wrappingOf(findings, castGuess) : null;
			if (found !== null) return found;
		}
	}
	return null;
}

/**
 * Whether a side names a column of the scanned table. PostgreSQL writes columns of an outer query with their alias
 * ("pages = (m.tier + 100)"): whatever is done with those, an index on the scanned column could serve.
 */
function namesOwnColumn(side: SideFindings, operator: PlanOperator): boolean {
	return side.aliases.some(
		(alias) => alias === null || alias.replaceAll('"', '') === (operator.alias ?? operator.relation)
	);
}

function wrappingOf(side: SideFindings, castGuess: boolean): string | null {
	if (side.columns.length === 0) return null;
	const [called] = side.functions;
	if (called !== undefined) return `${called}(…)`;
	const cast = side.casts.find((type) => castGuess || !HARMLESS_CASTS.has(type));
	if (cast !== undefined) return `a cast to ${cast}`;
	return side.arithmetic && !side.json ? 'arithmetic' : null;
}

/**
 * "(order_no)::text" looks alike for a varchar, where it costs nothing, and for a number, where it hides the index. For a number the
 * planner has no statistics of the expression and guesses one row in 200.
 */
function isGuessedForCast(operator: PlanOperator): boolean {
	const discard = readDiscard(operator, true);
	const planned = operator.facts.plannedRowsPerLoop;
	if (discard === null || planned === null || discard.read === 0) return false;
	const share = planned / discard.read;
	const error = planned / Math.max(1, discard.kept);
	return Math.abs(share / GUESSED_SHARE - 1) <= GUESS_TOLERANCE && error >= LEAST_GUESS_ERROR;
}

/** Scans whose condition wraps the column, so that no index on it can serve and the estimate is a guess. */
export const functionOnColumn: SymptomRule = {
	ids: ['function-on-column'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.flatMap((operator) => {
			const discard = readDiscard(operator, false);
			if (discard === null || discard.removed < LEAST_REMOVED.value) return [];
			if (discard.removed / discard.read < LEAST_REMOVED_SHARE.value) return [];
			const wrapping = findWrapping(operator);
			if (wrapping === null) return [];
			return [
				{
					id: 'function-on-column' as const,
					operator: operator.path,
					weight: weighRows(discard.removed),
					figures: toFigures({
						condition: operator.facts.filter,
						wrapping,
						removed: discard.removed,
						relation: operator.relation
					}),
					summary: `The condition of the ${phraseOperator(operator)} wraps its column in ${wrapping}: ${formatRows(discard.removed)} of ${formatRows(discard.read)} rows were read and thrown away.`
				}
			];
		});
	}
};
