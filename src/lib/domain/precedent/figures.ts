import type { Symptom } from '../reading/reading';

/** Figures that say how bad a symptom is, the most telling first; the first one that it carries is compared. */
const MAGNITUDES: readonly string[] = ['q', 'batches', 'temporaryBytes', 'diskKb', 'loops', 'share'];

/** The figure to compare decades by; null: the symptom carries none. */
export function readMagnitude(symptom: Symptom): number | null {
	for (const name of MAGNITUDES) {
		const figure = symptom.figures[name];
		if (typeof figure === 'number') return figure;
	}
	return null;
}

/** Whether a spill was planned or grew; null where that is no question. */
export function readCourse(symptom: Symptom): 'planned' | 'grown' | null {
	const said = symptom.figures.course ?? symptom.figures.planned ?? symptom.figures.how;
	return said === 'planned' || said === 'grown' ? said : null;
}
