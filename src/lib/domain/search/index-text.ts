import { termsOf } from '../precedent/tokens';
import { findConcepts } from '../precedent/trade-words';

/**
 * The way texts are cut into terms. Raised with every change of tokens.ts, stem.ts, stop-words.ts or
 * trade-words.ts that alters terms, and of profile.ts: what was indexed in an older way is indexed again.
 */
export const ANALYSIS = 1;

/** Of one text this much is indexed, so that a pasted log doesn't hold up the server or drown the rest. */
export const LONGEST_TEXT = 60_000;

/** The terms of a text as the full-text index takes them: one space between, never a character with a meaning. */
export function indexText(text: string): string {
	return termsOf(text.slice(0, LONGEST_TEXT)).join(' ');
}

/** The terms of the ideas that a text speaks of ("~spill"). */
export function listIdeas(text: string): string[] {
	return findConcepts(text.slice(0, LONGEST_TEXT)).map((concept) => concept.term);
}
