import type { CauseId, SymptomId } from '../symptom/symptom';
import { findConcepts } from './trade-words';

/**
 * What a text tells of without any evidence, from the ideas in it (trade-words.ts). Weaker than evidence and
 * weighed so (weights.ts). Common practice of the trade, no source.
 */

/** A symptom is told of when all of these ideas are in one text. */
const SYMPTOMS: readonly (readonly [SymptomId, ...string[]])[] = [
	['sort-spill', '~spill', '~sort'],
	['sort-spill', '~merge-passes'],
	['hash-spill', '~spill', '~hash-batches'],
	['aggregate-spill', '~spill', '~aggregate'],
	['materialize-spill', '~spill', '~materialize'],
	['temp-table-on-disk', '~temp-table'],
	['row-underestimate', '~estimate-off'],
	['skewed-hash', '~skew', '~hash-batches'],
	['build-side-larger', '~build-side'],
	['bitmap-lossy', '~lossy-bitmap'],
	['repeated-inner-scan', '~nested-loop'],
	['filter-discards-most', '~reads-everything'],
	['function-on-column', '~wrapped-column'],
	['full-join', '~join-buffer'],
	['missing-parallel-workers', '~parallel-workers'],
	['heap-fetches-high', '~visibility'],
	['cold-reads', '~cold-cache'],
	['jit-dominates', '~jit'],
	['deep-offset', '~offset'],
	['generic-plan', '~generic-plan'],
	['no-runtime-figures', '~estimates-only']
];

/** Ideas that name a cause or the remedy for it. */
const CAUSES: readonly (readonly [CauseId, ...string[]])[] = [
	['stale-statistics', '~stale-statistics'],
	['correlated-predicates', '~correlated'],
	['undersized-memory', '~memory-setting'],
	['skewed-join-key', '~skew'],
	['misjudged-distinct-count', '~distinct-count'],
	['missing-index', '~missing-index'],
	['join-without-index', '~missing-index', '~nested-loop'],
	['join-without-index', '~join-buffer'],
	['condition-not-indexable', '~wrapped-column'],
	['nested-loop-by-misestimate', '~nested-loop', '~estimate-off'],
	['wrong-build-side', '~build-side'],
	['generic-plan', '~generic-plan'],
	['stale-visibility-map', '~visibility'],
	['table-bloat', '~bloat'],
	['too-few-workers', '~parallel-workers'],
	['jit-overhead', '~jit'],
	['deep-offset', '~offset'],
	['cold-cache', '~cold-cache'],
	['temp-table-limits', '~temp-table']
];

function tell<T extends string>(text: string, table: readonly (readonly [T, ...string[]])[]): T[] {
	const ideas = new Set(findConcepts(text).map((concept) => concept.term));
	const told = table.filter(([, ...needed]) => needed.every((term) => ideas.has(term)));
	return [...new Set(told.map(([id]) => id))];
}

/** The symptoms that a text tells of, each once. */
export function findToldSymptoms(text: string): SymptomId[] {
	return tell(text, SYMPTOMS);
}

/** The causes that a text names, or names the remedy of, each once. */
export function findToldCauses(text: string): CauseId[] {
	return tell(text, CAUSES);
}
