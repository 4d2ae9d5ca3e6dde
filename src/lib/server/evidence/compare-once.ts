import type { Actor } from '$lib/domain/person/person';
import { ok, type Outcome } from '$lib/domain/problem';
import { chooseReadings, type ReadingPair } from '$lib/domain/reading/comparison/choose-readings';
import * as readings from '../readings/readings-service';
import type { UploadPair } from './receive-pair';
import { removeFromSpool } from './spool';

/**
 * Reads two uploads and stores nothing: the two readings that tell most beside each other. The spool files are
 * gone after.
 */
export async function readPair(actor: Actor, { before, after }: UploadPair): Promise<Outcome<ReadingPair>> {
	try {
		const [first, second] = await Promise.all([
			readings.read(actor, [before]),
			readings.read(actor, [after])
		]);
		if (!first.ok) return first;
		if (!second.ok) return second;
		const pair = chooseReadings(first.value, second.value);
		// Every file has at least one reading, be it one that says what it is not.
		if (pair === null) throw new Error('A file was read without any reading.');
		return ok(pair);
	} finally {
		await removeFromSpool([before.path, after.path]);
	}
}
