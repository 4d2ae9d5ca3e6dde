import type { SymptomId } from '../symptom/symptom';
import { walkOperators } from './operator';
import { phraseOperator } from './operator-phrase';
import type { Compared, ComparedPair } from './comparison/compared';
import type { Comparison } from './comparison/comparison';
import { matchOperators } from './comparison/match-operators';
import { listMisestimated } from './comparison/estimates';
import { describeChanges } from './comparison/operator-changes';
import { lacksRun, sayComparison } from './comparison/say-comparison';
import { listSpilled } from './comparison/spilled';
import type { Reading } from './reading';

export type { Comparison, OperatorChange } from './comparison/comparison';

/** Symptoms that a plan shows even when it was not run. Any other is not gone because the plan holds estimates only. */
const SHOWN_WITHOUT_RUN: readonly SymptomId[] = [
	'no-runtime-figures',
	'full-join',
	'generic-plan',
	'stale-statistics-reported',
	'no-statistics',
	'missing-index-reported'
];

/**
 * Two readings held beside each other: how time and temporary files moved, which symptoms are gone and which
 * are new, and every operator with what changed at it. Operators are matched by what they mean, not by their path.
 * Figures that one side does not hold stay null, and nothing is concluded from them. Linear in the size of the plans.
 */
export function compareReadings(before: Reading, after: Reading): Comparison {
	const pairs = pairOperators(before, after);
	const totalMs = Math.max(before.plan?.totalMs ?? 0, after.plan?.totalMs ?? 0);
	const operators = pairs.map((pair) => ({
		before: pair.before?.operator.path ?? null,
		after: pair.after?.operator.path ?? null,
		changes: describeChanges(pair, totalMs)
	}));
	const compared: Compared = {
		before,
		after,
		timeMs: [before.plan?.totalMs ?? null, after.plan?.totalMs ?? null],
		temporaryBytes: [sumTemporaryBytes(before), sumTemporaryBytes(after)],
		symptomsGone: listMissing(before, after),
		symptomsNew: listMissing(after, before),
		pairs,
		changed: operators.filter(({ changes }) => changes.length > 0).length
	};
	return {
		summary: sayComparison(compared),
		timeMs: compared.timeMs,
		temporaryBytes: compared.temporaryBytes,
		symptomsGone: [...compared.symptomsGone],
		symptomsNew: [...compared.symptomsNew],
		operators
	};
}

/** An operator with changes and the words that it is known by. */
export interface NamedChange {
	/** "hash join on invoice_no" */
	name: string;
	before: string | null;
	after: string | null;
	changes: string[];
}

/** A comparison as it is shown: only the operators at which something changed, each with its name. */
export interface NamedComparison extends Omit<Comparison, 'operators'> {
	changes: NamedChange[];
}

/** A comparison with the names of its changed operators, from the readings that were compared. */
export function nameComparison(comparison: Comparison, before: Reading, after: Reading): NamedComparison {
	const { operators, ...figures } = comparison;
	const [old, now] = [namesByPath(before), namesByPath(after)];
	const changes = operators
		.filter((change) => change.changes.length > 0)
		.map((change) => ({
			name: now.get(change.after ?? '') ?? old.get(change.before ?? '') ?? '',
			...change
		}));
	return { ...figures, changes };
}

function namesByPath({ plan }: Reading): Map<string, string> {
	const names = new Map<string, string>();
	if (plan === null) return names;
	for (const operator of walkOperators(plan.root)) names.set(operator.path, phraseOperator(operator));
	return names;
}

function pairOperators(before: Reading, after: Reading): ComparedPair[] {
	if (before.plan === null || after.plan === null) return [];
	const [spilledBefore, spilledAfter] = [listSpilled(before), listSpilled(after)];
	const [wrongBefore, wrongAfter] = [listMisestimated(before), listMisestimated(after)];
	return matchOperators(before.plan.root, after.plan.root).map((pair) => {
		const [was, is] = [pair.before?.operator.path ?? '', pair.after?.operator.path ?? ''];
		return {
			...pair,
			spilledBefore: spilledBefore.get(was) ?? null,
			spilledAfter: spilledAfter.get(is) ?? null,
			wrongBefore: wrongBefore.has(was),
			wrongAfter: wrongAfter.has(is)
		};
	});
}

/** What all operators of a plan wrote, or all statements of a log; null: not in the evidence. */
function sumTemporaryBytes({ plan, spills }: Reading): number | null {
	if (plan === null) return spills?.bytes ?? null;
	let sum: number | null = null;
	for (const { temporaryBytes } of walkOperators(plan.root))
		if (temporaryBytes !== null) sum = (sum ?? 0) + temporaryBytes;
	return sum;
}

/** The symptoms of one reading that the other could show and does not, heaviest first. */
function listMissing(shown: Reading, other: Reading): SymptomId[] {
	if (shown.plan === null || other.plan === null) return [];
	const inOther = new Set(other.symptoms.map(({ id }) => id));
	const unknowable = lacksRun(shown) || lacksRun(other);
	return [...new Set(shown.symptoms.map(({ id }) => id))].filter(
		(id) => !inOther.has(id) && (!unknowable || SHOWN_WITHOUT_RUN.includes(id))
	);
}
