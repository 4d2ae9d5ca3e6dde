import { SYMPTOM_CATALOGUE } from '$lib/domain/symptom/catalogue';
import type { SymptomId } from '$lib/domain/symptom/symptom';

/** What the symptoms' pages are found by. */
export function listSymptomTexts(): { id: SymptomId; title: string; texts: string[] }[] {
	return Object.values(SYMPTOM_CATALOGUE).map(({ id, title, what, recognise }) => ({
		id,
		title,
		texts: [what, recognise]
	}));
}
