import type { FieldIssue } from '../problem';

/** The times of an incident, UTC; null: not known. */
export interface IncidentTimes {
	startedAt: string | null;
	detectedAt: string | null;
	containedAt: string | null;
	resolvedAt: string | null;
}
export type IncidentTime = keyof IncidentTimes;

export const INCIDENT_TIMES = ['startedAt', 'detectedAt', 'containedAt', 'resolvedAt'] as const;

/**
 * What must not lie before what. An incident may well be noticed only after it was contained or over, so
 * detectedAt is held to the start alone.
 */
const ORDERS: readonly { earlier: IncidentTime; later: IncidentTime; message: string }[] = [
	{ earlier: 'startedAt', later: 'detectedAt', message: "It can't have been noticed before it began." },
	{ earlier: 'startedAt', later: 'containedAt', message: "It can't have been contained before it began." },
	{ earlier: 'startedAt', later: 'resolvedAt', message: "It can't have ended before it began." },
	{ earlier: 'containedAt', later: 'resolvedAt', message: "It can't have ended before it was contained." }
];

/**
 * Times that contradict each other. Each issue names the field that was given (`touched`): the later one
 * where both were, or neither.
 */
export function findTimeIssues(times: IncidentTimes, touched: ReadonlySet<string>): FieldIssue[] {
	const issues: FieldIssue[] = [];
	for (const { earlier, later, message } of ORDERS) {
		const before = times[earlier];
		const after = times[later];
		if (before === null || after === null || Date.parse(before) <= Date.parse(after)) continue;
		const field = !touched.has(later) && touched.has(earlier) ? earlier : later;
		issues.push({ field, message: `${message} (${earlier} ${before}, ${later} ${after})` });
	}
	return issues;
}
