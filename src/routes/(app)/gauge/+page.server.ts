import { readFile } from 'node:fs/promises';
import { suggestTitle } from '$lib/domain/incident/prefill';
import type { Problem } from '$lib/domain/problem';
import { sizingInput } from '$lib/domain/sizing/sizing';
import type { Actor } from '$lib/domain/person/person';
import { compareReadings, nameComparison } from '$lib/domain/reading/compare-readings';
import { readPair } from '$lib/server/evidence/compare-once';
import { requirePair } from '$lib/server/evidence/receive-pair';
import { receiveUploads } from '$lib/server/evidence/receive-uploads';
import { removeFromSpool } from '$lib/server/evidence/spool';
import type { Upload } from '$lib/server/evidence/upload';
import { readQuery } from '$lib/server/http/api';
import { requireActor } from '$lib/server/http/guard';
import { failWith } from '$lib/server/http/respond';
import * as readings from '$lib/server/readings/readings-service';
import type { Actions, PageServerLoad } from './$types';

/** The panel's figures as its form sends them by the address; null: none, or figures that don't fit. */
export const load = ((event) => {
	const asked = readQuery(event.url, sizingInput);
	return { asked: asked.ok ? asked.value : null };
}) satisfies PageServerLoad;

const NOTHING_GIVEN: Problem = {
	code: 'invalid',
	detail: 'Choose a file, or paste a plan or lines of a log first.'
};

/** What receiveUploads calls a text that came without a file. */
const PASTED_NAME = 'paste.txt';
/** Longer texts aren't sent back to be carried over. */
const CARRIED_BYTES = 500_000;

/** The text that was pasted, for logging it from here; null: there was none alone, or too much of it. */
async function readPasted(uploads: readonly Upload[]): Promise<string | null> {
	const [only] = uploads;
	if (only === undefined || uploads.length > 1 || only.name !== PASTED_NAME || only.bytes > CARRIED_BYTES)
		return null;
	return readFile(only.path, 'utf8');
}

/** An empty file field arrives as a file without bytes. */
function withBytes(uploads: readonly Upload[] = []): Upload[] {
	return uploads.filter(({ bytes }) => bytes > 0);
}

async function readGiven(actor: Actor, uploads: readonly Upload[]) {
	const given = withBytes(uploads);
	if (given.length === 0) return failWith(NOTHING_GIVEN, {});
	const read = await readings.read(actor, given);
	if (!read.ok) return failWith(read.problem, {});
	return { readings: read.value, title: suggestTitle(read.value), pasted: await readPasted(given) };
}

async function compareGiven(actor: Actor, more: Record<string, Upload[]>) {
	const given = requirePair(withBytes(more.before), withBytes(more.after));
	if (!given.ok) return failWith(given.problem, {});
	const pair = await readPair(actor, given.value);
	if (!pair.ok) return failWith(pair.problem, {});
	const { before, after } = pair.value;
	return { compared: nameComparison(compareReadings(before, after), before, after) };
}

export const actions = {
	/** For a browser without JavaScript; the others read here themselves. Nothing is stored. */
	default: async (event) => {
		const actor = requireActor(event);
		const received = await receiveUploads(event, { field: 'evidence', more: ['before', 'after'] });
		if (!received.ok) return failWith(received.problem, {});
		const { uploads, more } = received.value;
		try {
			return event.url.searchParams.has('compare')
				? await compareGiven(actor, more)
				: await readGiven(actor, uploads);
		} finally {
			await removeFromSpool([...uploads, ...Object.values(more).flat()].map((upload) => upload.path));
		}
	}
} satisfies Actions;
