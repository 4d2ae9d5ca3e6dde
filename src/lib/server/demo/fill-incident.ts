import { createHash } from 'node:crypto';
import { readFile, writeFile } from 'node:fs/promises';
import path from 'node:path';
import type { Incident, Severity } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import type { Outcome } from '$lib/domain/problem';
import { write } from '../db/transaction';
import * as evidence from '../evidence/evidence-service';
import { makeSpoolPath, PRIVATE_FILE } from '../evidence/spool';
import type { Upload } from '../evidence/upload';
import * as entries from '../incidents/entries-service';
import * as incidents from '../incidents/incidents-service';
import { clockOf, moveStamps, type DemoClock } from './demo-clock';
import type { DemoEvidence, DemoIncident } from './demo-content';
import { moveEvidence, moveIncident, moveStateEntry, settleEntries } from './demo-store';
import { fillAttempts } from './fill-attempts';

/** A service refused what the demonstration asks of it: our own text does not fit our own rules. */
export function valueOf<T>(outcome: Outcome<T>, what: string): T {
	if (outcome.ok) return outcome.value;
	const { detail, errors, reasons } = outcome.problem;
	throw new Error(`${what}: ${detail} ${JSON.stringify(errors ?? reasons ?? [])}`);
}

export interface FillContext {
	actors: ReadonlyMap<string, Actor>;
	now: Date;
}

/** The person of a key. Throws where the demonstration names nobody. */
export function actorOf(context: FillContext, key: string): Actor {
	const actor = context.actors.get(key);
	if (actor === undefined) throw new Error(`The demonstration names ${key}, who is nobody.`);
	return actor;
}

/** Puts a file of the demonstration into the spool, as a request would. */
async function spool(incident: DemoIncident, file: DemoEvidence, clock: DemoClock): Promise<Upload> {
	const stored = await readFile(path.join(incident.folder, file.file));
	const bytes =
		file.recordedAt === undefined
			? stored
			: Buffer.from(moveStamps(stored.toString('utf8'), file.recordedAt, clock.startedAt));
	const spoolPath = await makeSpoolPath('raw');
	await writeFile(spoolPath, bytes, { mode: PRIVATE_FILE });
	const rawSha256 = createHash('sha256').update(bytes).digest('hex');
	return {
		path: spoolPath,
		name: file.file,
		bytes: bytes.length,
		mimeType: 'application/octet-stream',
		rawSha256
	};
}

/** What is attached when the incident is logged; the rest comes later, by whoever did it. */
function isEarly(file: DemoEvidence): boolean {
	return file.by === undefined;
}

async function logIncident(
	incident: DemoIncident,
	clock: DemoClock,
	context: FillContext
): Promise<Incident> {
	const owner = incident.owner === null ? null : actorOf(context, incident.owner).personId;
	const early = incident.evidence.filter(isEarly);
	const uploads = await Promise.all(early.map((file) => spool(incident, file, clock)));
	const { title, narrative, service, database, engine, labels } = incident;
	const input = {
		...{ title, narrative, service, database, engine, labels, owner },
		engineVersion: incident.engineVersion ?? null,
		severity: incident.severity as Severity,
		startedAt: clock.startedAt,
		detectedAt: clock.at(incident.detected)
	};
	return valueOf(await incidents.create(actorOf(context, incident.loggedBy), input, uploads, 'demo'), title);
}

async function attachLater(number: number, incident: DemoIncident, clock: DemoClock, context: FillContext) {
	for (const file of incident.evidence.filter((one) => !isEarly(one))) {
		const actor = actorOf(context, file.by ?? incident.loggedBy);
		valueOf(await evidence.attach(actor, number, [await spool(incident, file, clock)]), incident.title);
	}
}

async function addEntries(number: number, incident: DemoIncident, clock: DemoClock, context: FillContext) {
	for (const { at, by, text } of incident.entries)
		valueOf(await entries.add(actorOf(context, by), number, { text, at: clock.at(at) }), incident.title);
}

/** Days after the end at which a curator reviews it. */
const REVIEWED_AFTER_MINUTES = 3 * 1440;

/** A curator who is not on the incident. */
function reviewerOf(incident: DemoIncident, context: FillContext): Actor {
	const curators = [...context.actors].filter(
		([key, { role }]) => role === 'curator' && key !== incident.owner
	);
	const [first] = curators;
	if (first === undefined) throw new Error('The demonstration needs a second curator.');
	return first[1];
}

async function moveOn(number: number, incident: DemoIncident, clock: DemoClock, context: FillContext) {
	const { title, contained, resolved, cause, resolution, state } = incident;
	const actor = actorOf(context, incident.owner ?? incident.loggedBy);
	const change = async (by: Actor, patch: Parameters<typeof incidents.update>[3]) => {
		const { revision } = valueOf(await incidents.read(by, number), title);
		valueOf(await incidents.update(by, number, revision, patch), title);
	};
	if (contained !== undefined) await change(actor, { state: 'contained', containedAt: clock.at(contained) });
	if (resolved !== undefined)
		await change(actor, {
			state: 'resolved',
			resolvedAt: clock.at(resolved),
			cause: cause ?? null,
			resolution
		});
	if (state === 'reviewed') await change(reviewerOf(incident, context), { state: 'reviewed' });
}

/** Gives everything that the services dated today the time at which the story has it. */
async function moveTimes(number: number, incident: DemoIncident, clock: DemoClock, context: FillContext) {
	const { evidence: files } = valueOf(
		await incidents.read(actorOf(context, incident.loggedBy), number),
		incident.title
	);
	const { detected, contained, resolved, state } = incident;
	const ends = resolved === undefined ? [] : [resolved + (state === 'reviewed' ? REVIEWED_AFTER_MINUTES : 0)];
	const last = Math.max(detected + 2, ...incident.entries.map(({ at }) => at), ...ends, contained ?? 0);
	await write(async (transaction) => {
		for (const { file, at } of incident.evidence) {
			const kept = files.find(({ name }) => name === file);
			if (kept !== undefined) await moveEvidence(kept.id, file, clock.at(at), transaction);
		}
		if (contained !== undefined) await moveStateEntry(number, 'Contained', clock.at(contained), transaction);
		if (resolved !== undefined) {
			await moveStateEntry(number, 'Resolved', clock.at(resolved), transaction);
			await moveStateEntry(number, 'Reviewed', clock.at(resolved + REVIEWED_AFTER_MINUTES), transaction);
		}
		await settleEntries(number, transaction);
		await moveIncident(number, { createdAt: clock.at(detected + 2), updatedAt: clock.at(last) }, transaction);
	});
}

/** Lives one incident of the demonstration through the services, then dates it; answers its number. */
export async function fillIncident(incident: DemoIncident, context: FillContext): Promise<number> {
	const clock = clockOf(incident, context.now);
	const { number } = await logIncident(incident, clock, context);
	await addEntries(number, incident, clock, context);
	await attachLater(number, incident, clock, context);
	await fillAttempts(number, incident, clock, context);
	await moveOn(number, incident, clock, context);
	await moveTimes(number, incident, clock, context);
	return number;
}
