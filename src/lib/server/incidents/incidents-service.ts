import { beginIncident } from '$lib/domain/incident/change-incident';
import type { Incident, IncidentSummary, Origin } from '$lib/domain/incident/incident';
import type { IncidentFilter } from '$lib/domain/incident/incident-filter';
import type { IncidentInput } from '$lib/domain/incident/incident-input';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import { record } from '../audit/audit-service';
import { write } from '../db/transaction';
import { hintsOf, keepAll } from '../evidence/keep-evidence';
import { keepUploads } from '../evidence/keep-uploads';
import { holdRaw } from '../evidence/late-reading';
import { refreshIncident } from '../evidence/refresh-incident';
import { removeFromSpool } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import { incidentChanged } from '../search/indexing';
import { countIncidents, listIncidents } from './incident-list-store';
import { toListFilter } from './list-filter';
import { insertIncident, listServices, toSummary } from './incident-store';
import { readIncident } from './read-incident';
import { needsResponder, noIncident } from './refusals';
import { findOwner, toColumns } from './update-incident';

export { update } from './update-incident';

const needsReader = () => fail('forbidden', 'Reading incidents takes a reader.');

/** One page of the incidents that a filter leaves, in its order, with how many there are in all. */
export async function list(actor: Actor, filter: IncidentFilter): Promise<Outcome<Page<IncidentSummary>>> {
	if (!can(actor, 'incident.read')) return needsReader();
	const name = `incidents ${filter.sort}`;
	const after = readCursor(name, filter.cursor);
	if (!after.ok) return after;
	const listFilter = toListFilter(actor, filter, new Date());
	const [found, total] = await Promise.all([
		listIncidents(listFilter, after.value),
		countIncidents(listFilter)
	]);
	const { rows, next } = cutPage(found, filter.limit, name, (row) => ({ key: row.sortKey, id: row.number }));
	return ok({ items: rows.map(toSummary), next, total });
}

/** The incident with evidence, readings, log and attempts. */
export async function read(actor: Actor, number: number): Promise<Outcome<Incident>> {
	if (!can(actor, 'incident.read')) return needsReader();
	const incident = await readIncident(actor, number);
	return incident === null ? noIncident(number) : ok(incident);
}

/** The services that incidents name, the most frequent first: what a filter or a form may suggest. */
export async function services(actor: Actor): Promise<Outcome<{ service: string; incidents: number }[]>> {
	if (!can(actor, 'incident.read')) return needsReader();
	return ok(await listServices());
}

async function refuseCreating(actor: Actor, input: IncidentInput): Promise<Outcome<null>> {
	if (!can(actor, 'incident.write')) return needsResponder();
	if (input.state === 'reviewed' && !can(actor, 'incident.review'))
		return fail('forbidden', 'Calling an incident reviewed takes a curator.');
	const owner = await findOwner(input.owner ?? null);
	return owner.ok ? ok(null) : owner;
}

/**
 * Logs an incident with its evidence, all of it or nothing. The uploads are masked and read first, so that
 * the answer carries their readings; the spool files are gone afterwards, whatever came of it.
 */
export async function create(
	actor: Actor,
	input: IncidentInput,
	uploads: readonly Upload[] = [],
	origin: Origin = 'person'
): Promise<Outcome<Incident>> {
	const now = new Date().toISOString();
	const allowed = await refuseCreating(actor, input);
	const begun = allowed.ok ? beginIncident(input, now) : allowed;
	if (!begun.ok) {
		await removeFromSpool(uploads.map(({ path }) => path));
		return begun;
	}
	const number = await keepUploads(uploads, (pending) =>
		write(async (transaction) => {
			const created = await insertIncident(
				{
					...toColumns(begun.value),
					origin,
					revision: 1,
					mergedInto: null,
					createdAt: now,
					createdById: actor.personId,
					updatedAt: now
				},
				transaction
			);
			const kept = await keepAll({ actor, incidentNumber: created, now, transaction }, pending);
			await holdRaw(kept);
			await refreshIncident(created, hintsOf(pending), now, transaction);
			await record(
				actor,
				'incident.create',
				`incident:${created}`,
				{ title: begun.value.title },
				transaction
			);
			await incidentChanged(created, transaction);
			return { value: created, kept };
		})
	);
	return read(actor, number);
}
