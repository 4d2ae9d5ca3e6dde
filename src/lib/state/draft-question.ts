import type { SymptomId } from '$lib/domain/symptom/symptom';

/** What the form holds so far. */
export interface DraftQuestion {
	text: string;
	service: string;
	engine: string;
	pieces: readonly { name: string; content: string | File; bytes: number }[];
	symptoms: readonly SymptomId[];
}

/** A plan fits; of a long log its beginning is enough to recognise the statement. */
const MOST_BYTES = 512 * 1024;
const RUNBOOKS = 3;

/** The body that asks for precedents; evidence cut to its beginning. */
export function toPrecedentForm(question: DraftQuestion): FormData {
	const form = new FormData();
	form.set('text', question.text);
	if (question.service !== '') form.set('service', question.service);
	if (question.engine !== '') form.set('engine', question.engine);
	for (const { name, content } of question.pieces)
		form.append('evidence', new Blob([content]).slice(0, MOST_BYTES), name);
	return form;
}

/** The query that asks for the published runbooks of its symptoms. */
export function toRunbookQuery(question: DraftQuestion): string {
	const query = new URLSearchParams({ state: 'published', limit: String(RUNBOOKS) });
	for (const symptom of question.symptoms) query.append('symptom', symptom);
	if (question.engine !== '' && question.engine !== 'unknown') query.set('engine', question.engine);
	return query.toString();
}
