import type { IncidentSummary } from '$lib/domain/incident/incident';
import { isZone } from '$lib/domain/incident/local-time';
import * as incidents from '$lib/server/incidents/incidents-service';
import { readIncidentPatch } from '../read-incident-form.server';
import { differences, toEditValues } from './edit-values';
import { formAction, readId } from './run-action.server';

/**
 * The form without the fields that say what stands there already: a time's field holds minutes only and would cut
 * its seconds off.
 */
function onlyChanged(typed: Record<string, string>, incident: IncidentSummary): Record<string, string> {
	const zone = typed.zone !== undefined && isZone(typed.zone) ? typed.zone : 'UTC';
	const changed = new Set<string>(differences(typed, toEditValues(incident, zone)));
	return Object.fromEntries(Object.entries(typed).filter(([name]) => name === 'zone' || changed.has(name)));
}

/** The forms that change the incident itself: its state, who is on it, its fields. */
export const stateActions = {
	move: formAction('move', '', async ({ actor, number, typed, revision }) => {
		const { causeText, ...fields } = typed;
		const cause = causeText?.trim() ? causeText : fields.cause;
		const patch = readIncidentPatch(cause === undefined ? fields : { ...fields, cause });
		return patch.ok ? incidents.update(actor, number, revision, patch.value) : patch;
	}),

	take: formAction('take', '', ({ actor, number, revision }) =>
		incidents.update(actor, number, revision, { owner: actor.personId })
	),

	handOver: formAction('handOver', '', ({ actor, number, typed, revision }) =>
		incidents.update(actor, number, revision, { owner: readId(typed.owner) || null })
	),

	edit: formAction('edit', '', async ({ actor, number, typed, revision }) => {
		const current = await incidents.read(actor, number);
		if (!current.ok) return current;
		const patch = readIncidentPatch(onlyChanged(typed, current.value));
		return patch.ok ? incidents.update(actor, number, revision, patch.value) : patch;
	})
};
