import { formatRows } from '../sizing/units';
import type { Symptom } from '../reading/reading';

/** Figures of a symptom without those that the evidence does not hold. */
export function toFigures(figures: Record<string, number | string | null>): Symptom['figures'] {
	const known: Symptom['figures'] = {};
	for (const [name, value] of Object.entries(figures)) if (value !== null) known[name] = value;
	return known;
}

/** "1 batch", "8 batches": a count with its noun. */
export function countOf(count: number, singular: string, plural = `${singular}s`): string {
	return `${formatRows(count)} ${count === 1 ? singular : plural}`;
}
