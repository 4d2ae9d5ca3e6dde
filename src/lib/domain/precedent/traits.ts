import type { Operator } from '../reading/operator';
import { walkOperators } from '../reading/operator';
import type { Reading, Trail } from '../reading/reading';

/** An inner side that runs at least this often makes the loop a trait of the plan. */
const MANY_LOOPS = 50;
/** The hashed side counts as the larger one from this factor on (the symptom asks for three). */
const LARGER_BUILD = 1.5;
/** At least this many rows, or the sides of a join say nothing. */
const ROWS_THAT_MATTER = 1000;

/** A call or a cast or an operator that reaches into a document: what hides a column from its statistics. */
const WRAPPED = /\b[a-z_][a-z0-9_]*\s*\(|::|->|#>/i;
const PARAMETER = /\$\d/;
const EXISTENCE = /\bsemi\b|\banti\b/i;

/** The operators of a plan by their path. */
export function indexByPath(root: Operator): Map<string, Operator> {
	return new Map([...walkOperators(root)].map((operator) => [operator.path, operator]));
}

/**
 * Traits that tell faults of one kind from another whatever the tables are called: where the misestimate
 * begins and under which sort of condition, where it overflows, what stands inside loops, which side is
 * hashed, and the operators that most plans don't have.
 */
export function findTraits(plan: NonNullable<Reading['plan']>, trails: readonly Trail[]): string[] {
	const operators = indexByPath(plan.root);
	const traits = new Set<string>();
	for (const trail of trails) {
		const begin = operators.get(trail.steps[0]?.operator ?? '');
		if (begin !== undefined) {
			traits.add(`begins-at:${begin.kind}`);
			traits.add(`begins-under:${classifyCondition(begin.condition)}`);
		}
		const overflow = trail.overflow === null ? undefined : operators.get(trail.overflow);
		if (overflow !== undefined) traits.add(`overflows-at:${overflow.kind}`);
	}
	for (const operator of operators.values()) {
		for (const trait of traitsOf(operator)) traits.add(trait);
	}
	return [...traits];
}

function* traitsOf(operator: Operator): Generator<string> {
	yield `has:${operator.kind}`;
	if ((operator.batches ?? 1) > 1 || (operator.temporaryBytes ?? 0) > 0) yield `spills:${operator.kind}`;
	if (operator.kind === 'nested-loop') {
		const inner = operator.children[1];
		// Without run-time figures nobody knows how often it would run; that it could is all there is to go by.
		if (inner !== undefined && (inner.loops ?? MANY_LOOPS) >= MANY_LOOPS) yield `loops-over:${inner.kind}`;
	}
	if (operator.kind.endsWith('join') && EXISTENCE.test(operator.name)) yield 'tests-existence';
	if (operator.kind === 'hash-join' && buildsOnLarger(operator)) yield 'hashes-larger-side';
	if ((operator.discardedRows ?? 0) >= ROWS_THAT_MATTER && operator.kind.endsWith('scan')) {
		yield `discards-under:${classifyCondition(operator.condition)}`;
	}
}

function buildsOnLarger(join: Operator): boolean {
	const [probe, build] = join.children;
	const built = build?.actualRows ?? 0;
	return built >= ROWS_THAT_MATTER && built >= LARGER_BUILD * Math.max(probe?.actualRows ?? Infinity, 1);
}

/** What sort of condition it is, in one word; only its form is looked at. */
function classifyCondition(condition: string | null): string {
	if (condition === null) return 'nothing';
	if (PARAMETER.test(condition)) return 'parameter';
	if (WRAPPED.test(condition)) return 'wrapped-column';
	return /\bAND\b/i.test(condition) ? 'several-predicates' : 'one-predicate';
}
