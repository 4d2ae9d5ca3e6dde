import type { Actor } from '$lib/domain/person/person';
import { ok, type Outcome } from '$lib/domain/problem';
import type { Reading } from '$lib/domain/reading/reading';
import * as readings from '../readings/readings-service';
import { linkRunbooks } from './link-runbooks';
import { removeFromSpool } from './spool';
import type { Upload } from './upload';

/** Reads uploads and stores nothing: the readings in their order, runbooks named; the spool files are gone after. */
export async function readOnce(actor: Actor, uploads: readonly Upload[]): Promise<Outcome<Reading[]>> {
	try {
		const read = await readings.read(actor, uploads);
		return read.ok ? ok(await linkRunbooks(actor, read.value)) : read;
	} finally {
		await removeFromSpool(uploads.map(({ path }) => path));
	}
}
