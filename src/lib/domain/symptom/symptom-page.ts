import type { IncidentSummary } from '../incident/incident';
import type { RunbookSummary } from '../runbook/runbook';
import type { CauseId, SymptomId } from './symptom';

/** How often a symptom was met. */
export interface SymptomCounts {
	/** Incidents whose evidence shows it. */
	incidents: number;
	/** Of them open or contained. */
	open: number;
	/** When the latest of them began, or was noticed; null: never met. */
	lastAt: string | null;
}

/** A symptom in the list of symptoms. */
export interface SymptomSummary extends SymptomCounts {
	id: SymptomId;
	title: string;
	/** One or two sentences. */
	what: string;
	/** Published runbooks that serve it; 0: it is not covered. */
	runbooks: number;
}

/** All that the page of a symptom shows. */
export interface SymptomPage extends SymptomCounts {
	id: SymptomId;
	title: string;
	what: string;
	/** How it is told from figures. */
	recognise: string;
	/** The limits that decide, each with its reason. */
	thresholds: { name: string; value: number; unit: string; why: string }[];
	usualCauses: { id: CauseId; title: string; what: string }[];
	/** The last twelve months, the oldest first; `month` is "2026-03". */
	months: { month: string; incidents: number }[];
	/** Published, the best first. */
	runbooks: RunbookSummary[];
	/** The latest first. */
	recent: IncidentSummary[];
}
