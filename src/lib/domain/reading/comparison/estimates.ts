import { formatRows, formatTimes } from '../../sizing/units';
import type { Operator } from '../operator';
import { differsByFactor, LEAST_WRONG_Q, MOST_RIGHT_Q } from './differences';

/** What became of an estimate: right or nearer now, wrong now, still wrong; null: nothing worth a word, or not known. */
export type EstimateCourse = 'right' | 'nearer' | 'wrong-now' | 'still-wrong' | null;

/** Fewer rows are read in no time, however wrong the number was; the threshold of the symptom rules. */
const LEAST_ROWS = 1000;

function isWrong({ qError, estimatedRows, actualRows }: Operator): boolean {
	return (
		qError !== null &&
		qError >= LEAST_WRONG_Q &&
		Math.max(estimatedRows ?? 0, actualRows ?? 0) >= LEAST_ROWS
	);
}

/** How the estimate of an operator went from one plan to the other. */
export function followEstimate(before: Operator, after: Operator): EstimateCourse {
	if (before.qError === null || after.qError === null) return null;
	if (isWrong(after)) return isWrong(before) ? 'still-wrong' : 'wrong-now';
	if (!isWrong(before)) return null;
	return after.qError < MOST_RIGHT_Q ? 'right' : 'nearer';
}

/** "450,250 for 450,300": expected for actual. */
export function sayEstimate({ estimatedRows, actualRows }: Operator): string {
	return `${formatRows(estimatedRows ?? 0)} for ${formatRows(actualRows ?? 0)}`;
}

/** What the estimate of an operator came to, for the table of changes; null: nothing worth a line. */
export function describeEstimate(before: Operator, after: Operator): string | null {
	switch (followEstimate(before, after)) {
		case 'right':
			return `the estimate is right now: ${sayEstimate(after)}, was ${sayEstimate(before)}`;
		case 'nearer':
			return `the estimate is nearer: ${sayEstimate(after)}, was ${sayEstimate(before)}`;
		case 'wrong-now':
			return `the estimate is wrong now: ${sayEstimate(after)}, was ${sayEstimate(before)}`;
		case 'still-wrong':
			return differsByFactor(before.qError, after.qError, LEAST_WRONG_Q)
				? `the estimate is off ${formatTimes(after.qError ?? 1)} instead of ${formatTimes(before.qError ?? 1)}`
				: null;
		default:
			return null;
	}
}
