import type { Person } from '../person/person';
import type { IncidentState, Severity } from '../incident/incident';

/** Where an incident's evidence overflows, in one line. */
export interface Overflow {
	/** "hash join on invoice_no"; null: the evidence holds temporary files but not what wrote them. */
	where: string | null;
	/** Bytes written to temporary files; null: the evidence doesn't say. */
	temporaryBytes: number | null;
	/** Temporary files; null: no log was read. */
	files: number | null;
}

/** What a person can do next for an incident, the most pressing thing only. */
export type NextStep =
	| { kind: 'take' }
	| { kind: 'follow'; attempt: number; runbook: string | null; title: string; step: number; of: number }
	| { kind: 'record'; attempt: number; runbook: string | null; title: string }
	| { kind: 'runbook'; count: number }
	| { kind: 'evidence' }
	| { kind: 'write' };

/** An incident as the Watch shows it. */
export interface WatchedIncident {
	number: number;
	title: string;
	service: string | null;
	engine: string | null;
	engineVersion: string | null;
	severity: Severity;
	state: IncidentState;
	revision: number;
	owner: Person | null;
	/** Noticed, else begun, else logged. */
	since: string;
	containedAt: string | null;
	overflow: Overflow | null;
	next: NextStep;
}

/** An attempt that nobody has ended. */
export interface AttemptUnderWay {
	id: number;
	incident: number;
	incidentTitle: string;
	runbook: string | null;
	title: string;
	by: Person | null;
	startedAt: string;
	/** The next step that is neither ticked nor skipped; null: none is left, or it follows no runbook. */
	step: number | null;
	/** Steps of the runbook's revision; 0: it follows no runbook. */
	of: number;
}

export interface ReviewDue {
	slug: string;
	title: string;
	reviewDue: string;
	owner: Person | null;
}

/** Temporary files of one week, Monday to Sunday in UTC. */
export interface WeekOfSpills {
	/** The Monday, YYYY-MM-DD. */
	from: string;
	/** Sum over the week's log readings; null: no log of that week was read. */
	temporaryBytes: number | null;
	/** Log readings summed. */
	logs: number;
}

/** A fix that worked. */
export interface WorkedFix {
	attempt: number;
	incident: number;
	incidentTitle: string;
	runbook: string | null;
	title: string;
	endedAt: string;
}

/** Everything that needs a person now, and what lies beside it. */
export interface Watch {
	/** When it was worked out. */
	at: string;
	/** Without an owner first, then by severity, then oldest first; at most `OPEN_SHOWN`. */
	open: WatchedIncident[];
	openTotal: number;
	/** Contained, and nobody has said what the cause was. */
	contained: WatchedIncident[];
	containedTotal: number;
	attempts: AttemptUnderWay[];
	reviews: ReviewDue[];
	/** Oldest first, the last one is the current week. */
	weeks: WeekOfSpills[];
	worked: WorkedFix[];
	/** Incidents ever logged: 0 is an empty installation. */
	incidents: number;
}
