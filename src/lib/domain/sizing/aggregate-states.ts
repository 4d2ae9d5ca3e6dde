/**
 * What the aggregates of a hash aggregate keep for each group, read from the widths alone: plans name the aggregates only with VERBOSE.
 */
import { INTEGER_STATE, NUMERIC_STATE, TEXT_STATE, type GroupShape, type StateShape } from './aggregate';

/** PostgreSQL's width guess for results without statistics: numeric and text (get_typavgwidth). */
const WIDE_RESULT_BYTES = 32;
const NARROW_RESULT_BYTES = 8;
/** Widths of integer columns; a numeric column's average is 3 to about 12. */
const INTEGER_WIDTHS = [2, 4, 8];
const WIDEST_NUMERIC_BYTES = 12;
const MOST_WIDE = 6;
const MOST_NARROW = 10;

export interface AggregateWidths {
	/** Data width of the input rows (keys and arguments), bytes. */
	inputBytes: number;
	/** Data width of the output rows (keys and results), bytes. */
	outputBytes: number;
	/** Grouping columns. */
	keys: number;
}

interface Split {
	wide: number;
	narrow: number;
	argumentBytes: number;
}

/**
 * The fewest aggregates that explain both widths: output = keys + results (8 bytes each, or 32 for numeric and text),
 * input = keys + arguments. Without arguments only count(*) is possible. Where nothing explains them, one by-value aggregate.
 */
export function guessGroupShape(widths: AggregateWidths): GroupShape {
	const { inputBytes, outputBytes } = widths;
	let best: Split | null = null;
	for (let wide = 0; wide <= MOST_WIDE; wide++) {
		for (let narrow = 0; narrow <= MOST_NARROW; narrow++) {
			const keyBytes = outputBytes - wide * WIDE_RESULT_BYTES - narrow * NARROW_RESULT_BYTES;
			const split = { wide, narrow, argumentBytes: inputBytes - keyBytes };
			if (keyBytes >= widths.keys && isPlausible(split) && isSimpler(split, best)) best = split;
		}
	}
	if (best === null) return { keyBytes: Math.min(inputBytes, outputBytes), transitions: 1, states: [] };
	return {
		keyBytes: inputBytes - best.argumentBytes,
		transitions: countTransitions(best),
		states: Array.from({ length: best.wide }, () => stateOf(best))
	};
}

/** A lone count(*) and a count with a 4-byte result beside it leave the same widths: room for two, so that it never falls short. */
function countTransitions({ wide, narrow }: Split): number {
	return wide === 0 && narrow === 1 ? 2 : wide + narrow;
}

function isPlausible(split: Split): boolean {
	if (split.argumentBytes < 0) return false;
	if (split.argumentBytes === 0) return split.wide === 0 && split.narrow <= 1;
	if (split.wide === 0) return true;
	// Each wide result reads at least a small numeric; several may read the same column.
	return split.argumentBytes >= 2;
}

function isSimpler(split: Split, best: Split | null): boolean {
	if (best === null) return true;
	const difference = split.wide + split.narrow - (best.wide + best.narrow);
	if (difference !== 0) return difference < 0 && !isStrained(split);
	return split.wide > best.wide && !isStrained(split);
}

/** One wide result over an argument that no numeric column has: more, narrower aggregates explain it better. */
function isStrained(split: Split): boolean {
	return (
		split.wide > 0 &&
		split.argumentBytes > split.wide * WIDEST_NUMERIC_BYTES + split.narrow * NARROW_RESULT_BYTES
	);
}

function stateOf(split: Split): StateShape {
	const each = split.argumentBytes / split.wide;
	if (split.narrow === 0 && INTEGER_WIDTHS.includes(each)) return INTEGER_STATE;
	return each > 2 * WIDEST_NUMERIC_BYTES ? TEXT_STATE : NUMERIC_STATE;
}
