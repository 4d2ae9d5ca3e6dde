import {
	changeIncident,
	type IncidentChange,
	type IncidentFacts,
	type IncidentField
} from '$lib/domain/incident/change-incident';
import type { Incident } from '$lib/domain/incident/incident';
import type { IncidentPatch } from '$lib/domain/incident/incident-input';
import { can } from '$lib/domain/person/can';
import type { Actor, Person } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { record } from '../audit/audit-service';
import { fromJson, toJson } from '../db/json';
import { write, type Transaction } from '../db/transaction';
import { incidentChanged } from '../search/indexing';
import {
	findActivePerson,
	findIncident,
	keepRevision,
	updateIncident,
	type IncidentChanges,
	type IncidentRow
} from './incident-store';
import { logChanges } from './log-changes';
import { readIncident } from './read-incident';
import { changedMeanwhile, needsResponder, noIncident } from './refusals';

function toFacts(row: IncidentRow): IncidentFacts {
	return {
		title: row.title,
		narrative: row.narrative,
		service: row.service,
		engine: row.engine,
		engineVersion: row.engineVersion,
		database: row.database,
		severity: row.severity,
		state: row.state,
		ownerId: row.ownerId,
		startedAt: row.startedAt,
		detectedAt: row.detectedAt,
		containedAt: row.containedAt,
		resolvedAt: row.resolvedAt,
		cause: row.cause,
		resolution: row.resolution,
		labels: fromJson<string[]>(row.labels)
	};
}

/** The columns of these facts. */
export function toColumns({
	labels,
	...facts
}: IncidentFacts): Required<Omit<IncidentFacts, 'labels'>> & { labels: string } {
	return { ...facts, labels: toJson(labels) };
}

/** The named person, who must be able to sign in; null where nobody is named. */
export async function findOwner(ownerId: number | null): Promise<Outcome<Person | null>> {
	if (ownerId === null) return ok(null);
	const owner = await findActivePerson(ownerId);
	if (owner !== null) return ok(owner);
	const message = `Nobody who may sign in has the id ${ownerId}.`;
	return fail('invalid', message, { errors: [{ field: 'owner', message }] });
}

interface PlannedEdit {
	before: IncidentFacts;
	change: IncidentChange;
	owner: Person | null;
}

/** Everything that can stand in the way of an edit, found before anything is written. */
async function planEdit(
	actor: Actor,
	row: IncidentRow,
	patch: IncidentPatch,
	now: string
): Promise<Outcome<PlannedEdit>> {
	const before = toFacts(row);
	const change = changeIncident(before, patch, now);
	if (!change.ok) return change;
	const { after, changed } = change.value;
	if (changed.includes('state') && after.state === 'reviewed' && !can(actor, 'incident.review'))
		return fail('forbidden', 'Calling an incident reviewed takes a curator.');
	if (!changed.includes('ownerId')) return ok({ before, change: change.value, owner: null });
	const owner = await findOwner(after.ownerId);
	return owner.ok ? ok({ before, change: change.value, owner: owner.value }) : owner;
}

function pick(facts: IncidentFacts, fields: readonly IncidentField[]): Partial<IncidentFacts> {
	return Object.fromEntries(fields.map((field) => [field, facts[field]]));
}

async function writeEdit(
	actor: Actor,
	row: IncidentRow,
	edit: PlannedEdit & { reason: string | null; now: string },
	transaction: Transaction
): Promise<void> {
	const { before, change, now } = edit;
	const { number, revision } = row;
	const replaced = pick(before, change.changed);
	const changes: IncidentChanges = {
		...toColumns(change.after),
		revision: revision + 1,
		updatedAt: now
	};
	await keepRevision(
		{ number, revision, changedById: actor.personId, changedAt: now, before: replaced },
		transaction
	);
	await updateIncident(number, changes, transaction);
	await logChanges({ number, actor, ...edit }, transaction);
	await record(actor, 'incident.update', `incident:${number}`, { fields: change.changed }, transaction);
	await incidentChanged(number, transaction);
}

async function answer(actor: Actor, number: number): Promise<Outcome<Incident>> {
	const incident = await readIncident(actor, number);
	return incident === null ? noIncident(number) : ok(incident);
}

/**
 * Edits an incident by a merge patch based on `revision`: `stale` with the present state where somebody was
 * faster, `refused` with every reason where a move isn't allowed. What it replaced is kept. A patch that
 * changes nothing makes no revision.
 */
export async function update(
	actor: Actor,
	number: number,
	revision: number,
	patch: IncidentPatch
): Promise<Outcome<Incident>> {
	if (!can(actor, 'incident.write')) return needsResponder();
	const now = new Date().toISOString();
	const written = await write(async (transaction): Promise<Outcome<null>> => {
		const row = await findIncident(number);
		if (row === null) return noIncident(number);
		if (row.revision !== revision)
			return changedMeanwhile(`Incident ${number}`, revision, await readIncident(actor, number));
		const planned = await planEdit(actor, row, patch, now);
		if (!planned.ok) return planned;
		if (planned.value.change.changed.length > 0)
			await writeEdit(actor, row, { ...planned.value, reason: patch.reason ?? null, now }, transaction);
		return ok(null);
	});
	return written.ok ? answer(actor, number) : written;
}
