import type { Engine, Reading } from '../reading/reading';
import type { CauseId } from '../symptom/symptom';
import type { IncidentState } from '../incident/incident';

export const REASON_KINDS = ['words', 'symptoms', 'cause', 'statement', 'setting', 'verdict'] as const;
export type ReasonKind = (typeof REASON_KINDS)[number];
export type Verdict = 'same' | 'related' | 'not';

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

/** What two incidents are compared on, drawn from an incident or from unsaved text and evidence. */
export interface PrecedentProfile {
	title: string;
	text: string;
	service: string | null;
	engine: Engine | null;
	database: string | null;
	startedAt: string | null;
	symptoms: {
		id: string;
		weight: number;
		/** The figure that says how bad it is, for comparing decades. */
		magnitude: number | null;
		planned: boolean | null;
		/** Kind and relation of the operator where it shows. */
		at: string | null;
	}[];
	causes: { id: CauseId; confidence: number }[];
	fingerprints: string[];
	relations: string[];
	/** Operator kinds along the trails, "seq-scan>hash-build>hash-join". */
	shapes: string[];
}

/** Readings of one incident with nothing else: the evidence part of a profile. */
export type EvidenceOfIncident = Pick<
	Reading,
	'symptoms' | 'causes' | 'statement' | 'plan' | 'trails' | 'spills'
>;
