import type { IncidentSummary } from '$lib/domain/incident/incident';
import { writeLocalTime } from '$lib/domain/incident/local-time';

/** The fields that the edit form holds, with the words that its labels say. */
export const EDIT_FIELDS = {
	title: 'What is wrong',
	service: 'Service',
	engine: 'Engine',
	engineVersion: 'Version',
	database: 'Database',
	startedAt: 'Began',
	detectedAt: 'Noticed',
	containedAt: 'Contained',
	resolvedAt: 'Resolved',
	severity: 'Severity',
	labels: 'Labels',
	narrative: 'What is seen',
	cause: 'Cause',
	resolution: 'What ended it'
} as const;
export type EditField = keyof typeof EDIT_FIELDS;
export type EditValues = Record<EditField, string>;

/** An incident as the edit form holds it; times in the reader's zone. */
export function toEditValues(incident: IncidentSummary, zone: string): EditValues {
	const time = (at: string | null) => (at === null ? '' : writeLocalTime(at, zone));
	return {
		title: incident.title,
		service: incident.service ?? '',
		engine: incident.engine ?? '',
		engineVersion: incident.engineVersion ?? '',
		database: incident.database ?? '',
		startedAt: time(incident.startedAt),
		detectedAt: time(incident.detectedAt),
		containedAt: time(incident.containedAt),
		resolvedAt: time(incident.resolvedAt),
		severity: String(incident.severity),
		labels: incident.labels.join(', '),
		narrative: incident.narrative,
		cause: incident.cause ?? '',
		resolution: incident.resolution ?? ''
	};
}

/** The fields in which what was typed differs from what stands there now. */
export function differences(typed: Partial<EditValues>, now: EditValues): EditField[] {
	const fields = Object.keys(EDIT_FIELDS) as EditField[];
	// A form sends its line ends as carriage return and line feed.
	const plain = (text: string) => text.replaceAll('\r\n', '\n').trim();
	return fields.filter((field) => {
		const text = typed[field];
		return text !== undefined && plain(text) !== plain(now[field]);
	});
}
