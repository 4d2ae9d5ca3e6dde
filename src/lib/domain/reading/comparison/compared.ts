import type { SymptomId } from '../../symptom/symptom';
import type { Reading } from '../reading';
import type { OperatorPair } from './match-operators';
import type { Spilled } from './spilled';

/** A pair of operators with what the two readings say of each. */
export interface ComparedPair extends OperatorPair {
	/** What it left in temporary files; null: it stayed in memory, or is not there. */
	spilledBefore: Spilled | null;
	spilledAfter: Spilled | null;
	/** Whether the reading finds its estimate wrong. */
	wrongBefore: boolean;
	wrongAfter: boolean;
}

/** Two readings with everything that was worked out about them: what the sentences are made from. */
export interface Compared {
	before: Reading;
	after: Reading;
	timeMs: [number | null, number | null];
	temporaryBytes: [number | null, number | null];
	symptomsGone: readonly SymptomId[];
	symptomsNew: readonly SymptomId[];
	pairs: readonly ComparedPair[];
	/** Operators with changes. */
	changed: number;
}

/** "a", "a and b", "a, b and c". */
export function listWords(words: readonly string[]): string {
	const last = words.at(-1) ?? '';
	return words.length < 2 ? last : `${words.slice(0, -1).join(', ')} and ${last}`;
}

/** A sentence out of a clause: "the sort …" → "The sort … ."; one that begins with a table's name leaves it as it is. */
export function toSentence(clause: string): string {
	const isWord = /^(the|a|an) /.test(clause);
	return `${isWord ? clause.charAt(0).toUpperCase() + clause.slice(1) : clause}.`;
}
