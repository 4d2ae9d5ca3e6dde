import { SYMPTOM_IDS, type CauseId, type SymptomId } from '../symptom/symptom';
import { findToldInWords } from '../symptom/told-in-words';

/**
 * What a text tells of without any evidence: symptoms by the phrases of told-in-words.ts, causes by the ideas
 * of trade-words.ts. Weaker than evidence and weighed so (weights.ts). Common practice of the trade, no source.
 */

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

/** The symptoms that a text tells of, each once. */
export function findToldSymptoms(text: string): SymptomId[] {
	const told = findToldInWords(text).map((finding) => finding.figures.symptom);
	return SYMPTOM_IDS.filter((id) => told.includes(id));
}

/** The causes that the ideas of a text name, or name the remedy of, each once. */
export function findToldCauses(ideas: readonly string[]): CauseId[] {
	const told = CAUSES.filter(([, ...needed]) => needed.every((term) => ideas.includes(term)));
	return [...new Set(told.map(([id]) => id))];
}
