import type { SymptomId } from '../../symptom/symptom';

/** One operator of two plans, and what is different about it. */
export interface OperatorChange {
	/** Path in the plan before; null: it is new. */
	before: string | null;
	/** Path in the plan after; null: it is gone. */
	after: string | null;
	/** What changed, most telling first; empty: nothing beyond the noise of two runs. */
	changes: string[];
}

/** Two readings held beside each other: how an attempt is judged. */
export interface Comparison {
	/** What changed, in a few sentences; the answer before any figure. */
	summary: string;
	/** Run time before and after, ms; null: not in the evidence. */
	timeMs: [number | null, number | null];
	/** Bytes that went to temporary files before and after; null: not in the evidence. */
	temporaryBytes: [number | null, number | null];
	/** Shown before and no longer, heaviest first. */
	symptomsGone: SymptomId[];
	/** Shown after and not before, heaviest first. */
	symptomsNew: SymptomId[];
	/** Every operator of both plans once: those before in the order of the plan, then the new ones. */
	operators: OperatorChange[];
}
