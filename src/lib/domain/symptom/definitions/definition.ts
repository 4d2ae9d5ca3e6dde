import type { CauseId, SymptomId } from '../symptom';
import type { Threshold } from '../threshold';

/** One entry of the catalogue: what a symptom is, for people who meet it the first time. */
export interface SymptomDefinition {
	id: SymptomId;
	/** As a heading: "Hash table spilled". */
	title: string;
	/** What it is, in two or three sentences. */
	what: string;
	/** Where it stands in the evidence. */
	recognise: string;
	/** Empty: the engine says so itself, or the rule belongs to an engine whose plans are not read yet. */
	thresholds: readonly Threshold[];
	/** Commonest first. */
	usualCauses: readonly CauseId[];
}

/** What stands behind symptoms. */
export interface CauseDefinition {
	id: CauseId;
	title: string;
	what: string;
}
