import type { Symptom } from '../reading/reading';
import type { SymptomId } from '../symptom/symptom';

/**
 * The figure that says how bad a symptom is. One for each, so that like is compared with like; a symptom
 * without an entry has none that decades would mean something for.
 */
const MAGNITUDES: Readonly<Partial<Record<SymptomId, string>>> = {
	'row-underestimate': 'q',
	'row-overestimate': 'q',
	'generic-plan': 'q',
	'hash-spill': 'batches',
	'skewed-hash': 'batches',
	'aggregate-spill': 'batches',
	'sort-spill': 'diskKb',
	'materialize-spill': 'temporaryBytes',
	'temp-table-on-disk': 'bytes',
	'build-side-larger': 'ratio',
	'repeated-inner-scan': 'loops',
	'filter-discards-most': 'read',
	'function-on-column': 'removed',
	'heap-fetches-high': 'fetches',
	'cold-reads': 'read',
	'deep-offset': 'brought'
};

/** The figure to compare decades by; null: the symptom carries none. */
export function readMagnitude(symptom: Symptom): number | null {
	const figure = symptom.figures[MAGNITUDES[symptom.id] ?? ''];
	return typeof figure === 'number' ? figure : null;
}

/** Whether a spill was planned or grew; null where that is no question. */
export function readCourse(symptom: Symptom): 'planned' | 'grown' | null {
	const { course } = symptom.figures;
	return course === 'planned' || course === 'grown' ? course : null;
}
