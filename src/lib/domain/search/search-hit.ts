export const HIT_KINDS = ['incident', 'runbook', 'symptom', 'entry'] as const;
export type HitKind = (typeof HIT_KINDS)[number];

/** One line of a search's answer. */
export interface SearchHit {
	kind: HitKind;
	id: string;
	title: string;
	url: string;
	/** The text round the words found; `mark` where a word was met. */
	snippet: { text: string; mark: boolean }[];
	score: number;
}
