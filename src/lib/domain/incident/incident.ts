import type { Reading } from '../reading/reading';
import type { Person } from '../person/person';
import type { SymptomId } from '../symptom/symptom';
import type { Attempt } from './attempt';

export const INCIDENT_STATES = ['open', 'contained', 'resolved', 'reviewed'] as const;
export type IncidentState = (typeof INCIDENT_STATES)[number];

export const ORIGINS = ['person', 'alert', 'import', 'demo'] as const;
export type Origin = (typeof ORIGINS)[number];

/** 1 business stands still … 4 noticed. */
export type Severity = 1 | 2 | 3 | 4;

export type EntryKind = 'note' | 'evidence' | 'state' | 'attempt' | 'alert';

/** One dated line of an incident's log. */
export interface Entry {
	id: number;
	at: string;
	/** Markdown. */
	text: string;
	/** null: the system. */
	author: Person | null;
	kind: EntryKind;
	revision: number;
}

export type EvidenceKind = 'plan' | 'log' | 'picture' | 'other';

export interface Evidence {
	id: number;
	/** Of the masked bytes. */
	sha256: string;
	name: string;
	bytes: number;
	kind: EvidenceKind;
	format: string;
	state: 'reading' | 'read' | 'failed';
	addedAt: string;
	addedBy: Person | null;
	readings: Reading[];
}

export interface FollowUp {
	id: number;
	text: string;
	owner: Person | null;
	due: string | null;
	doneAt: string | null;
	revision: number;
}

/** What a list shows of an incident: everything but its readings. */
export interface IncidentSummary {
	number: number;
	title: string;
	narrative: string;
	service: string | null;
	engine: string | null;
	engineVersion: string | null;
	database: string | null;
	severity: Severity;
	state: IncidentState;
	owner: Person | null;
	origin: Origin;
	startedAt: string | null;
	detectedAt: string | null;
	containedAt: string | null;
	resolvedAt: string | null;
	/** A cause id of domain/symptom, or free text. */
	cause: string | null;
	resolution: string | null;
	labels: string[];
	revision: number;
	createdAt: string;
	createdBy: Person | null;
	updatedAt: string;
	symptoms: SymptomId[];
	recurrence: { count: number; first: string; last: string } | null;
	mergedInto: number | null;
}

export interface Incident extends IncidentSummary {
	evidence: Evidence[];
	entries: Entry[];
	attempts: Attempt[];
	followUps: FollowUp[];
}

/** The moves that a state allows, and nothing else. */
export const MOVES: Record<IncidentState, readonly IncidentState[]> = {
	open: ['contained', 'resolved'],
	contained: ['resolved', 'open'],
	resolved: ['reviewed', 'open'],
	reviewed: []
};
