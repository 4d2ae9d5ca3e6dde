import { incidentInput, type IncidentInput } from '$lib/domain/incident/incident-input';
import { isZone, readLocalTime } from '$lib/domain/incident/local-time';
import { fail, type FieldIssue, type Outcome } from '$lib/domain/problem';
import { toFields, validate } from '$lib/server/http/fields';

const TIMES = ['startedAt', 'detectedAt', 'containedAt', 'resolvedAt'] as const;

/**
 * The fields of an incident's form as the domain takes them. Times are local to the zone that the form names (UTC
 * without one); empty fields count as null.
 */
export function readIncidentForm(typed: Record<string, string>): Outcome<IncidentInput> {
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
	const read = validate(
		incidentInput,
		toFields(incidentInput.shape, (name) => (fields[name] === undefined ? [] : [fields[name]]))
	);
	if (issues.length === 0) return read;
	return fail('invalid', 'Correct the fields that are marked.', {
		errors: [...issues, ...(read.ok ? [] : (read.problem.errors ?? []))]
	});
}
