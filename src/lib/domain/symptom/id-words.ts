import { CAUSE_IDS } from './symptom';

/** Ids of symptoms and causes are words: "hash-spill" → "hash spill". */
export function wordOf(id: string): string {
	return id.replaceAll('-', ' ').replace(/\bjit\b/, 'JIT');
}

/** A cause as words: an id of the catalogue, or the text that somebody wrote. */
export function writeCause(cause: string): string {
	return CAUSE_IDS.some((id) => id === cause) ? wordOf(cause) : cause;
}
