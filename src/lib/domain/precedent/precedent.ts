import type { IncidentState } from '../incident/incident';
import type { OperatorKind } from '../reading/operator';
import type { Engine, Reading } from '../reading/reading';
import type { CauseId, SymptomId } from '../symptom/symptom';

export const REASON_KINDS = ['words', 'symptoms', 'cause', 'statement', 'setting', 'verdict'] as const;
export type ReasonKind = (typeof REASON_KINDS)[number];

export const VERDICTS = ['same', 'related', 'not'] as const;
export type Verdict = (typeof VERDICTS)[number];

export interface PrecedentReason {
	kind: ReasonKind;
	text: string;
	/** Shares of one precedent add up to 1. */
	share: number;
}

export interface Precedent {
	number: number;
	title: string;
	/** 0..1 */
	score: number;
	state: IncidentState;
	startedAt: string | null;
	resolvedAt: string | null;
	/** First 300 characters. */
	resolution: string | null;
	cause: string | null;
	/** It began after the one asked about. */
	later: boolean;
	reasons: PrecedentReason[];
	verdict: Verdict | null;
}

/** One symptom as two incidents are compared on it. */
export interface ProfileSymptom {
	id: SymptomId;
	/** 0..1; of several operators that show it, the heaviest. */
	weight: number;
	/** The figure that says how bad it is, for comparing decades; null: the evidence holds none. */
	magnitude: number | null;
	/** A spill that the planner reckoned with (planned) or that came as a surprise (grown); null: no such question. */
	course: 'planned' | 'grown' | null;
	/** Where it shows. */
	operator: OperatorKind | null;
	relation: string | null;
	/** Only said in the narrative; no evidence shows it. */
	told: boolean;
}

/** What the readings of one incident say, without its words. */
export interface EvidenceProfile {
	/** One of each id, heaviest first. */
	symptoms: ProfileSymptom[];
	/** Likeliest first, with the symptoms that each rests on. */
	causes: { id: CauseId; confidence: number; because: SymptomId[] }[];
	/** Of the statements; heaviest spiller first. */
	fingerprints: string[];
	relations: string[];
	/** Operator kinds along the trails, "seq-scan>hash-build>hash-join". */
	shapes: string[];
	/** Traits of the plan that tell faults of one kind from another, "begins-at:function-scan". */
	traits: string[];
	/** Some plan of it has run-time figures. */
	hasRun: boolean;
}

/** What the words of one incident tell of, evidence aside. */
export interface ToldProfile {
	/** Terms of the ideas that narrative or resolution speak of (trade-words.ts). */
	ideas: string[];
	toldSymptoms: SymptomId[];
	/** Causes that the words name, or name the remedy of; `isRemedied`: in the resolution. */
	toldCauses: { id: CauseId; isRemedied: boolean }[];
}

/** What two incidents are compared on beside their words. */
export interface PrecedentProfile extends EvidenceProfile {
	toldCauses: ToldProfile['toldCauses'];
	ideas: string[];
	service: string | null;
	engine: Engine | null;
	database: string | null;
	startedAt: string | null;
	/** A cause that a person wrote down, where it is one of the catalogue's. */
	confirmedCause: CauseId | null;
}

/** The part of a reading that a profile is drawn from. */
export type EvidenceOfIncident = Pick<
	Reading,
	'symptoms' | 'causes' | 'statement' | 'plan' | 'trails' | 'spills'
>;

/** Another incident that may be a precedent. */
export interface Candidate {
	number: number;
	profile: PrecedentProfile;
	/** BM25 of its text for the words asked about; null: none of them is in it. */
	bm25: number | null;
	/** What ended it is known. */
	hasOutcome: boolean;
	verdict: Verdict | null;
}

/** The one asked about. */
export interface Question {
	profile: PrecedentProfile;
	/** BM25 that a text as good as the question's own would reach; 0: no words were asked. */
	bestBm25: number;
}

/** How much a feature tells: the rarer among the incidents with evidence, the more. At least 0. */
export type Rarity = (feature: string) => number;

/** How alike two incidents are in each respect, 0..1; null: there is nothing to compare by. */
export type Likeness = Record<ReasonKind, number | null>;

export interface RankedPrecedent {
	candidate: Candidate;
	/** 0..1 */
	score: number;
	likeness: Likeness;
	/** What each respect adds to the score; they sum up to it. */
	contributions: Record<ReasonKind, number>;
}
