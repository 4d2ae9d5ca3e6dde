import { SYMPTOM_IDS, type SymptomId } from '$lib/domain/symptom/symptom';

/** What the symptoms' pages are found by. */
export function listSymptomTexts(): { id: SymptomId; title: string; texts: string[] }[] {
	return SYMPTOM_IDS.map((id) => ({ id, title: id.replaceAll('-', ' '), texts: [] }));
}
