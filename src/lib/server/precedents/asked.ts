import type { PrecedentProfile } from '$lib/domain/precedent/precedent';
import { NO_EVIDENCE, profileEvidence, profileOf, profileWords } from '$lib/domain/precedent/profile';
import type { Engine, Reading } from '$lib/domain/reading/reading';
import * as store from './candidate-store';

/** What precedents are asked for, logged or not. */
export interface Asked {
	/** null: not logged. */
	number: number | null;
	/** Title and narrative: what is known at night. The resolution, which comes later, is not asked for. */
	text: string;
	profile: PrecedentProfile;
	/** When it began, for "41 days ago". */
	at: string;
}

/** Something that is not logged yet. */
export interface Draft {
	title?: string | null;
	text?: string | null;
	service?: string | null;
	engine?: Engine | null;
	database?: string | null;
	startedAt?: string | null;
	readings?: readonly Reading[];
}

/** The question that a logged incident puts; null: there is no such incident. */
export async function askIncident(number: number): Promise<Asked | null> {
	const incident = await store.readAskedIncident(number);
	if (incident === null) return null;
	const text = `${incident.title}\n${incident.narrative}`;
	const profile = profileOf(incident, incident.profile ?? NO_EVIDENCE, profileWords(text, null));
	return { number, text, profile, at: incident.startedAt ?? incident.createdAt };
}

/** The question that unsaved text and evidence put. */
export function askDraft(draft: Draft, now: Date): Asked {
	const text = [draft.title ?? '', draft.text ?? ''].join('\n').trim();
	const readings = draft.readings ?? [];
	const engine = readings.find((reading) => reading.engine !== 'unknown')?.engine;
	const fields = {
		service: draft.service ?? null,
		engine: draft.engine ?? engine ?? null,
		database: draft.database ?? null,
		startedAt: draft.startedAt ?? null,
		cause: null
	};
	const profile = profileOf(fields, profileEvidence(readings), profileWords(text, null));
	return { number: null, text, profile, at: draft.startedAt ?? now.toISOString() };
}
