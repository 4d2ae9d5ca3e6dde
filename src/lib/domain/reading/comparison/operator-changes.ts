import { formatBytes, formatKb, formatRows } from '../../sizing/units';
import { countOf } from '../../symptom/figures';
import type { Operator } from '../operator';
import { differs, differsByFactor, LEAST_MS, sayMsMove } from './differences';
import { describeEstimate } from './estimates';
import type { ComparedPair } from './compared';
import { orderCondition, type PlacedOperator } from './operator-meaning';
import { buildSideOf, sayKind, sayTables } from './operator-words';
import type { Spilled } from './spilled';

/** Fewer rows make no difference that anybody waits for. */
const LEAST_ROWS = 1000;
const LEAST_LOOPS = 100;
const LEAST_MEMORY_KB = 1024;
/** An operator's own time wavers more than the whole; what is less than this share of the whole is not where the time went. */
const LEAST_SHARE_OF_TIME = 0.05;
/** Longer conditions are cut: the plan itself is at hand. */
const LONGEST_CONDITION = 60;

/**
 * What changed at a pair of operators, most telling first; empty: nothing beyond the noise of two runs.
 * `totalMs`: how long the slower plan took as a whole.
 */
export function describeChanges(pair: ComparedPair, totalMs: number): string[] {
	const { before, after } = pair;
	if (before === null) return after === null ? [] : ['new', ...overflowOf(pair.spilledAfter)];
	if (after === null) return ['gone', ...overflowOf(pair.spilledBefore)];
	const [was, is] = [before.operator, after.operator];
	const texts = [describeMethod(was, is), ...describeSides(before, after), describeSpill(pair)];
	// A hash table repeats the rows of its input; what is its own is its memory.
	if (is.kind !== 'hash-build') texts.push(describeEstimate(pair), ...describeWork(was, is, totalMs));
	texts.push(describeMemory(pair, was, is));
	return texts.filter((text) => text !== null);
}

/** Whether two paired hash joins fill their table from different tables. */
export function hasChangedSides(before: Operator, after: Operator): boolean {
	const [was, is] = [buildSideOf(before), buildSideOf(after)];
	return was !== null && is !== null && sayTables(was) !== sayTables(is);
}

function describeMethod(was: Operator, is: Operator): string | null {
	if (was.kind !== is.kind) return `${sayKind(is)} instead of ${sayKind(was)}`;
	return was.name === is.name ? null : `${is.name} instead of ${was.name}`;
}

function describeSides(before: PlacedOperator, after: PlacedOperator): (string | null)[] {
	const [was, is] = [before.operator, after.operator];
	const [wasSide, isSide] = [buildSideOf(was), buildSideOf(is)];
	const sides =
		wasSide !== null && isSide !== null && hasChangedSides(was, is)
			? `builds on ${sayTables(isSide)} instead of ${sayTables(wasSide)}`
			: null;
	const order =
		after.job === 'join' && before.tables !== after.tables
			? `joins ${countOf(after.tables, 'table')} instead of ${formatRows(before.tables)}`
			: null;
	return [sides, order, describeCondition(was.condition, is.condition)];
}

function describeCondition(was: string | null, is: string | null): string | null {
	if (was === null || is === null || orderCondition(was) === orderCondition(is)) return null;
	return `${shorten(is)} instead of ${shorten(was)}`;
}

function describeSpill({ spilledBefore: was, spilledAfter: is }: ComparedPair): string | null {
	if (was === null) return is === null ? null : `overflows now${ofFigures(is)}`;
	if (is === null) return `no longer overflows${ofFigures(was, 'was ')}`;
	const bytes =
		was.bytes !== null && is.bytes !== null && differs(was.bytes, is.bytes)
			? `${formatBytes(is.bytes)} of temporary files instead of ${formatBytes(was.bytes)}`
			: null;
	const batches =
		was.batches !== null && is.batches !== null && was.batches !== is.batches
			? `${countOf(is.batches, 'batch', 'batches')} instead of ${formatRows(was.batches)}`
			: null;
	const parts = [bytes, batches].filter((part) => part !== null);
	return parts.length === 0 ? null : `still overflows: ${parts.join(', ')}`;
}

function overflowOf(spilled: Spilled | null): string[] {
	return spilled === null ? [] : [`overflows${ofFigures(spilled)}`];
}

/** ": 8 batches, 55 MB of temporary files"; empty where the evidence holds neither. */
function ofFigures({ batches, bytes }: Spilled, before = ''): string {
	const parts: string[] = [];
	if (batches !== null && batches > 1) parts.push(countOf(batches, 'batch', 'batches'));
	if (bytes !== null && bytes > 0) parts.push(`${formatBytes(bytes)} of temporary files`);
	return parts.length === 0 ? '' : `: ${before}${parts.join(', ')}`;
}

function describeWork(was: Operator, is: Operator, totalMs: number): (string | null)[] {
	const leastMs = Math.max(LEAST_MS, LEAST_SHARE_OF_TIME * totalMs);
	return [
		differsByFactor(was.loops, is.loops, LEAST_LOOPS)
			? `runs ${countOf(is.loops ?? 0, 'time')} instead of ${formatRows(was.loops ?? 0)}`
			: null,
		differsByFactor(was.actualRows, is.actualRows, LEAST_ROWS)
			? `${countOf(is.actualRows ?? 0, 'row')} instead of ${formatRows(was.actualRows ?? 0)}`
			: null,
		differsByFactor(was.discardedRows, is.discardedRows, LEAST_ROWS)
			? `throws away ${countOf(is.discardedRows ?? 0, 'row')} instead of ${formatRows(was.discardedRows ?? 0)}`
			: null,
		was.selfMs !== null && is.selfMs !== null && differs(was.selfMs, is.selfMs, leastMs)
			? `own time ${sayMsMove(was.selfMs, is.selfMs)}`
			: null
	];
}

/** Where an operator was short of memory, or shows what it used; a limit that nobody came near tells nothing. */
function describeMemory(pair: ComparedPair, was: Operator, is: Operator): string | null {
	const isNear = pair.spilledBefore !== null || pair.spilledAfter !== null || is.kind === 'hash-build';
	if (
		isNear &&
		was.memoryLimitKb !== null &&
		is.memoryLimitKb !== null &&
		was.memoryLimitKb !== is.memoryLimitKb
	)
		return `may use ${formatKb(is.memoryLimitKb)} instead of ${formatKb(was.memoryLimitKb)}`;
	return differsByFactor(was.memoryKb, is.memoryKb, LEAST_MEMORY_KB)
		? `uses ${formatKb(is.memoryKb ?? 0)} instead of ${formatKb(was.memoryKb ?? 0)}`
		: null;
}

function shorten(text: string): string {
	return text.length <= LONGEST_CONDITION ? text : `${text.slice(0, LONGEST_CONDITION - 1).trimEnd()}…`;
}
