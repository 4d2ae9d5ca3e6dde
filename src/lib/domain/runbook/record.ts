import type { AttemptOutcome } from '../incident/attempt';
import type { RunbookRecord } from './runbook';

/** A share's bounds, both from 0 to 1. */
export interface Interval {
	low: number;
	high: number;
}

/** The standard normal deviate of 95 %. */
const Z = 1.959964;

/**
 * 95 % interval of a share of x in n by Wilson's score, without continuity correction (Newcombe, Statistics in
 * Medicine 17, 1998, 857-872, method 3). Nothing tried: 0 to 1.
 */
export function wilsonInterval(x: number, n: number): Interval {
	if (n <= 0) return { low: 0, high: 1 };
	const share = x / n;
	const square = Z * Z;
	const centre = 2 * n * share + square;
	const spread = Z * Math.sqrt(square + 4 * n * share * (1 - share));
	const scale = 2 * (n + square);
	return { low: Math.max(0, (centre - spread) / scale), high: Math.min(1, (centre + spread) / scale) };
}

/** Counts how attempts ended; those still under way (null) are left out. */
export function recordOf(outcomes: readonly (AttemptOutcome | null)[]): RunbookRecord {
	const count = (outcome: AttemptOutcome) => outcomes.filter((one) => one === outcome).length;
	return {
		worked: count('worked'),
		partly: count('partly'),
		noEffect: count('no-effect'),
		madeWorse: count('made-worse')
	};
}

/** How many attempts have an outcome. */
export function triedOf(record: RunbookRecord): number {
	return record.worked + record.partly + record.noEffect + record.madeWorse;
}

/** "worked 7 of 9 (45 to 94 %)"; "not tried yet". */
export function describeRecord(record: RunbookRecord): string {
	const tried = triedOf(record);
	if (tried === 0) return 'not tried yet';
	const { low, high } = wilsonInterval(record.worked, tried);
	return `worked ${record.worked} of ${tried} (${Math.round(low * 100)} to ${Math.round(high * 100)} %)`;
}
