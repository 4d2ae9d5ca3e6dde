import { formatRows, formatTimes } from '../../sizing/units';
import type { Operator } from '../operator';
import type { Reading } from '../reading';
import { differsByFactor, LEAST_WRONG_Q, MOST_RIGHT_Q } from './differences';
import type { ComparedPair } from './compared';

/** What became of an estimate: right or nearer now, wrong now, still wrong; null: nothing worth a word, or not known. */
export type EstimateCourse = 'right' | 'nearer' | 'wrong-now' | 'still-wrong' | null;

/**
 * The paths at which a reading finds an estimate wrong: its symptoms and what its trails pass. Not every
 * figure that is off is one: below a limit nobody asked for the rest of the rows.
 */
export function listMisestimated({ symptoms, trails }: Reading): Set<string> {
	const paths = symptoms.flatMap(({ id, operator }) =>
		operator !== null && (id === 'row-underestimate' || id === 'row-overestimate') ? [operator] : []
	);
	const steps = trails.flatMap((trail) =>
		trail.steps.flatMap(({ operator, ratio }) =>
			Math.max(ratio, 1 / ratio) >= LEAST_WRONG_Q ? [operator] : []
		)
	);
	return new Set([...paths, ...steps]);
}

/** How the estimate of an operator went from one plan to the other. */
export function followEstimate({ before, after, wrongBefore, wrongAfter }: ComparedPair): EstimateCourse {
	// A hash table repeats the estimate of its input.
	if (before === null || after === null || after.operator.kind === 'hash-build') return null;
	if (wrongAfter) return wrongBefore ? 'still-wrong' : 'wrong-now';
	const { qError } = after.operator;
	if (!wrongBefore || qError === null) return null;
	if (qError < MOST_RIGHT_Q) return 'right';
	return qError < (before.operator.qError ?? 0) / MOST_RIGHT_Q ? 'nearer' : null;
}

/** "450,250 for 450,300": expected for actual. */
export function sayEstimate({ estimatedRows, actualRows }: Operator): string {
	return `${formatRows(estimatedRows ?? 0)} for ${formatRows(actualRows ?? 0)}`;
}

/** What the estimate of an operator came to, for the table of changes; null: nothing worth a line. */
export function describeEstimate(pair: ComparedPair): string | null {
	const [was, is] = [pair.before?.operator, pair.after?.operator];
	if (was === undefined || is === undefined) return null;
	const figures = `${sayEstimate(is)}, was ${sayEstimate(was)}`;
	switch (followEstimate(pair)) {
		case 'right':
			return `the estimate is right now: ${figures}`;
		case 'nearer':
			return `the estimate is nearer: ${figures}`;
		case 'wrong-now':
			return `the estimate is wrong now: ${figures}`;
		case 'still-wrong':
			return differsByFactor(was.qError, is.qError, LEAST_WRONG_Q)
				? `the estimate is off ${formatTimes(is.qError ?? 1)} instead of ${formatTimes(was.qError ?? 1)}`
				: null;
		default:
			return null;
	}
}
