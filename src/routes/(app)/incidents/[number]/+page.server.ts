import { error } from '@sveltejs/kit';
import { listRequiredChecks } from '$lib/domain/caution/required-checks';
import { can } from '$lib/domain/person/can';
import type { Incident } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import { ENGINES, type Engine } from '$lib/domain/reading/reading';
import { requireActor } from '$lib/server/http/guard';
import { unwrap } from '$lib/server/http/respond';
import { nameAttempt } from '$lib/server/incidents/compare-attempts';
import * as incidents from '$lib/server/incidents/incidents-service';
import { render } from '$lib/server/markdown/render';
import * as people from '$lib/server/people/people-service';
import * as precedents from '$lib/server/precedents/precedents-service';
import * as runbooks from '$lib/server/runbooks/runbooks-service';
import type { Actions, PageServerLoad } from './$types';
import { attemptActions } from './attempt-actions.server';
import type { StepFacts } from './draw-attempt';
import { drawEvidence } from './draw-evidence';
import { logActions } from './log-actions.server';
import { readNumber } from './run-action.server';
import { stateActions } from './state-actions.server';

const PRECEDENTS = 5;

/** Texts of Markdown beside their HTML: the text is what an edit begins with. */
function drawTexts(incident: Incident) {
	const { evidence, entries, attempts, ...facts } = incident;
	return {
		...facts,
		narrativeHtml: render(incident.narrative),
		resolutionHtml: render(incident.resolution ?? ''),
		entries: entries.map((entry) => ({ ...entry, html: render(entry.text, { topHeading: 4 }) })),
		attempts: attempts.map((attempt) => ({
			...attempt,
			comparison: nameAttempt(attempt, evidence),
			noteHtml: render(attempt.note ?? '', { topHeading: 4 })
		}))
	};
}

/** An engine's name as the catalogue knows it; null: another one, or none. */
function toEngine(name: string | null): Engine | null {
	return ENGINES.find((engine) => engine === name) ?? null;
}

/** The steps of runbooks under way, by attempt and number; only where the revision is still the one followed. */
async function readStepFacts(actor: Actor, { attempts }: Incident) {
	const open = attempts.filter(({ runbook, outcome }) => runbook !== null && outcome === null);
	const facts: Record<number, Record<number, StepFacts>> = {};
	for (const { id, runbook, runbookRevision } of open) {
		const found = await runbooks.read(actor, runbook ?? '');
		if (found.ok && found.value.revision === runbookRevision)
			facts[id] = Object.fromEntries(
				found.value.steps.map(({ number, title, statements }) => [
					number,
					{ title, isChecked: listRequiredChecks(statements).length > 0 }
				])
			);
	}
	return facts;
}

export const load = (async (event) => {
	const actor = requireActor(event);
	const number = readNumber(event.params.number);
	if (number === null) error(404, { message: `There is no incident ${event.params.number}.` });
	event.depends('catchwater:incident');
	const [read, alike] = await Promise.all([
		incidents.read(actor, number),
		precedents.forIncident(actor, number, PRECEDENTS)
	]);
	const incident = unwrap(read);
	const [suited, responders, stepFacts] = await Promise.all([
		runbooks.forSymptoms(actor, incident.symptoms, toEngine(incident.engine)),
		can(actor, 'incident.write') ? people.listResponders(actor) : null,
		readStepFacts(actor, incident)
	]);
	return {
		incident: drawTexts(incident),
		evidence: drawEvidence(
			incident.evidence,
			event.url.searchParams.get('reading'),
			incident.attempts.flatMap(({ after }) => after ?? [])
		),
		precedents: unwrap(alike),
		runbooks: unwrap(suited),
		responders: responders === null ? [] : unwrap(responders),
		stepFacts
	};
}) satisfies PageServerLoad;

export const actions = { ...stateActions, ...logActions, ...attemptActions } satisfies Actions;
