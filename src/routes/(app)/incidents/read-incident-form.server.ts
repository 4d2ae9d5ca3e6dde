import {
	incidentInput,
	incidentPatch,
	type IncidentInput,
	type IncidentPatch
} from '$lib/domain/incident/incident-input';
import { isZone, readLocalTime } from '$lib/domain/incident/local-time';
import { fail, type FieldIssue, type Outcome } from '$lib/domain/problem';
import { toFields, validate } from '$lib/server/http/fields';
import type { z } from 'zod';

const TIMES = ['startedAt', 'detectedAt', 'containedAt', 'resolvedAt'] as const;

/**
 * Reads a form against a schema of the domain. Times are local to the zone that the form names (UTC without one),
 * labels stand in one line with commas between them, empty fields count as null.
 */
function readTyped<S extends z.ZodObject>(typed: Record<string, string>, schema: S): Outcome<z.output<S>> {
	const zone = typed.zone !== undefined && isZone(typed.zone) ? typed.zone : 'UTC';
	const fields = { ...typed };
	const issues: FieldIssue[] = [];
	for (const name of TIMES) {
		const text = fields[name];
		if (text === undefined || text === '') continue;
		const at = readLocalTime(text, zone);
		if (at === null)
			issues.push({ field: name, message: 'Give a date and a time, such as 2026-12-01 01:05.' });
		fields[name] = at ?? '';
	}
	const textsOf = (name: string) => {
		const text = fields[name];
		if (text === undefined) return [];
		return name === 'labels' ? text.split(',').map((label) => label.trim()) : [text];
	};
	const read = validate(schema, toFields(schema.shape, textsOf));
	if (issues.length === 0 && read.ok) return read;
	return fail('invalid', 'Correct the fields that are marked.', {
		errors: [...issues, ...(read.ok ? [] : (read.problem.errors ?? []))]
	});
}

/** The form of a new incident. */
export function readIncidentForm(typed: Record<string, string>): Outcome<IncidentInput> {
	return readTyped(typed, incidentInput);
}

/** A form that edits an incident: only the fields that it holds change. */
export function readIncidentPatch(typed: Record<string, string>): Outcome<IncidentPatch> {
	const read = readTyped(typed, incidentPatch);
	// A line of labels that was emptied takes them all away.
	if (read.ok && typed.labels?.trim() === '') read.value.labels = null;
	return read;
}
