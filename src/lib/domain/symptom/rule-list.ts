import { aggregateSpill } from './rules/aggregate-spill';
import { bitmapLossy } from './rules/bitmap-lossy';
import { buildSideLarger } from './rules/build-side-larger';
import { coldReads } from './rules/cold-reads';
import { deepOffset } from './rules/deep-offset';
import { estimates } from './rules/estimates';
import { filterDiscardsMost } from './rules/filter-discards-most';
import { fullJoin } from './rules/full-join';
import { functionOnColumn } from './rules/function-on-column';
import { genericPlan } from './rules/generic-plan';
import { hashSpill } from './rules/hash-spill';
import { heapFetchesHigh } from './rules/heap-fetches-high';
import { jitDominates } from './rules/jit-dominates';
import { materializeSpill } from './rules/materialize-spill';
import { missingParallelWorkers } from './rules/missing-parallel-workers';
import { noRuntimeFigures } from './rules/no-runtime-figures';
import { repeatedInnerScan } from './rules/repeated-inner-scan';
import { skewedHash } from './rules/skewed-hash';
import { sortSpill } from './rules/sort-spill';
import type { SymptomRule } from './symptom';

/** The only list of rules. A new rule is a file in rules/ and a line here. */
export const RULES: readonly SymptomRule[] = [
	estimates,
	hashSpill,
	sortSpill,
	aggregateSpill,
	materializeSpill,
	skewedHash,
	buildSideLarger,
	bitmapLossy,
	repeatedInnerScan,
	filterDiscardsMost,
	functionOnColumn,
	fullJoin,
	missingParallelWorkers,
	heapFetchesHigh,
	coldReads,
	jitDominates,
	deepOffset,
	genericPlan,
	noRuntimeFigures
];
