import type { SymptomId } from '../symptom/symptom';
import { findConcepts } from './trade-words';

/** Ideas that speak of a symptom plainly enough to be compared with one that evidence shows. */
const TOLD: ReadonlyMap<string, SymptomId> = new Map([
	['~lossy-bitmap', 'bitmap-lossy'],
	['~jit', 'jit-dominates'],
	['~visibility', 'heap-fetches-high'],
	['~offset', 'deep-offset'],
	['~generic-plan', 'generic-plan'],
	['~parallel-workers', 'missing-parallel-workers'],
	['~cold-cache', 'cold-reads'],
	['~wrapped-column', 'function-on-column'],
	['~join-buffer', 'full-join']
]);

/** The symptoms that a narrative tells of, each once; what it denies is left out. */
export function findToldSymptoms(text: string): SymptomId[] {
	const told = findConcepts(text).map((concept) => TOLD.get(concept.term));
	return [...new Set(told.filter((id) => id !== undefined))];
}
