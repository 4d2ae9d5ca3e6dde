import type { Entry } from '$lib/domain/incident/incident';
import type { EntryInput, EntryPatch } from '$lib/domain/incident/incident-input';
import type { PageQuery } from '$lib/domain/incident/incident-filter';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { cutPage, readCursor } from '../api/cursor';
import { record } from '../audit/audit-service';
import { write } from '../db/transaction';
import { incidentChanged } from '../search/indexing';
import { countEntries, findEntry, insertEntry, listEntries, replaceEntry } from './entry-store';
import { hasIncident, touchIncident } from './incident-store';
import { changedMeanwhile, needsResponder, noIncident } from './refusals';

const FIRST_PAGE: PageQuery = { limit: 200 };

function noEntry(number: number, id: number): Outcome<never> {
	return fail('not_found', `Incident ${number} has no entry ${id}.`);
}

/** A page of an incident's log, earliest first. */
export async function list(
	actor: Actor,
	number: number,
	query: PageQuery = FIRST_PAGE
): Promise<Outcome<Page<Entry>>> {
	if (!can(actor, 'entry.read')) return fail('forbidden', 'Reading the log takes a reader.');
	if (!(await hasIncident(number))) return noIncident(number);
	const name = `entries ${number}`;
	const after = readCursor(name, query.cursor);
	if (!after.ok) return after;
	const [found, total] = await Promise.all([
		listEntries(number, { after: after.value, limit: query.limit + 1 }),
		countEntries(number)
	]);
	const { rows, next } = cutPage(found, query.limit, name, (entry) => ({ key: entry.at, id: entry.id }));
	return ok({ items: rows, next, total });
}

/** One entry of an incident's log. */
export async function read(actor: Actor, number: number, id: number): Promise<Outcome<Entry>> {
	if (!can(actor, 'entry.read')) return fail('forbidden', 'Reading the log takes a reader.');
	const entry = await findEntry(number, id);
	return entry === null ? noEntry(number, id) : ok(entry);
}

/** Adds a note to the log; it tells of now where no time is given. */
export async function add(actor: Actor, number: number, input: EntryInput): Promise<Outcome<Entry>> {
	if (!can(actor, 'entry.write')) return needsResponder();
	const now = new Date().toISOString();
	const id = await write(async (transaction) => {
		if (!(await hasIncident(number))) return null;
		const added = await insertEntry(
			{
				incidentNumber: number,
				at: input.at ?? now,
				text: input.text,
				authorId: actor.personId,
				kind: 'note',
				createdAt: now
			},
			transaction
		);
		await touchIncident(number, now, transaction);
		await record(actor, 'entry.add', `entry:${added}`, { incident: number }, transaction);
		await incidentChanged(number, transaction);
		return added;
	});
	return id === null ? noIncident(number) : read(actor, number, id);
}

/** Corrects an entry: its author, or a curator. What it said before is kept. */
export async function update(
	actor: Actor,
	number: number,
	id: number,
	revision: number,
	patch: EntryPatch
): Promise<Outcome<Entry>> {
	if (!can(actor, 'entry.write')) return needsResponder();
	const now = new Date().toISOString();
	const written = await write(async (transaction): Promise<Outcome<null>> => {
		const before = await findEntry(number, id);
		if (before === null) return noEntry(number, id);
		if (!can(actor, 'entry.edit', { ownerId: before.author?.id ?? null }))
			return fail('forbidden', 'An entry is corrected by whoever wrote it, or by a curator.');
		if (before.revision !== revision) return changedMeanwhile(`Entry ${id}`, revision, before);
		const after = { at: patch.at ?? before.at, text: patch.text ?? before.text };
		if (after.at === before.at && after.text === before.text) return ok(null);
		await replaceEntry(before, after, { byId: actor.personId, at: now }, transaction);
		await touchIncident(number, now, transaction);
		await record(actor, 'entry.update', `entry:${id}`, { incident: number }, transaction);
		await incidentChanged(number, transaction);
		return ok(null);
	});
	return written.ok ? read(actor, number, id) : written;
}
