import { formatBytes, formatMs } from '../../sizing/units';

/** What two runs of the same plan differ by anyway. Common practice, no source: two runs on a quiet machine stay within a tenth. */
export const LEAST_SHARE = 0.1;
/** Below a millisecond the clock decides, not the plan. */
export const LEAST_MS = 1;
/** Estimates are off from here on; the threshold of the symptoms row-underestimate and row-overestimate. */
export const LEAST_WRONG_Q = 10;
/** An estimate within a factor of two sizes memory and chooses joins as the true number would. Common practice, no source. */
export const MOST_RIGHT_Q = 2;
/** How far apart counts have to be before a table of changes names them. */
export const LEAST_FACTOR = 2;

/** Whether two figures differ by more than two runs of one plan would; false where either is not known. */
export function differs(before: number | null, after: number | null, least = 0): boolean {
	if (before === null || after === null) return false;
	const apart = Math.abs(after - before);
	return apart > least && apart > LEAST_SHARE * Math.max(Math.abs(before), Math.abs(after));
}

/** Whether two counts are at least a factor of two apart and not both small; false where either is not known. */
export function differsByFactor(before: number | null, after: number | null, least: number): boolean {
	if (before === null || after === null || Math.max(before, after) < least) return false;
	const ratio = Math.max(after, 1) / Math.max(before, 1);
	return ratio >= LEAST_FACTOR || ratio <= 1 / LEAST_FACTOR;
}

/** "646 to 404 ms", "1.2 s to 404 ms": the unit stands once where it is the same. */
export function joinFigures(first: string, word: string, second: string): string {
	const unit = / \S+$/.exec(second)?.[0] ?? '';
	const shared = unit !== '' && first.endsWith(unit) && !/ .* /.test(first) && !/ .* /.test(second);
	return `${shared ? first.slice(0, -unit.length) : first} ${word} ${second}`;
}

/** "fell from 646 to 404 ms", "rose from …". */
export function sayMove(before: number, after: number, format: (value: number) => string): string {
	return `${after < before ? 'fell' : 'rose'} from ${joinFigures(format(before), 'to', format(after))}`;
}

/** "27 MB instead of 55": the unit stands once, with the newer figure. */
export function sayBytesInstead(before: number, after: number): string {
	const [now, was] = [formatBytes(after), formatBytes(before)];
	const unit = / \S+$/.exec(now)?.[0] ?? '';
	return `${now} instead of ${unit !== '' && was.endsWith(unit) ? was.slice(0, -unit.length) : was}`;
}

/** Milliseconds of two runs: "fell from 646 to 404 ms". */
export function sayMsMove(before: number, after: number): string {
	return sayMove(before, after, formatMs);
}
