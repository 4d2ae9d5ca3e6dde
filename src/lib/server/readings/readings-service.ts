import { can } from '../../domain/person/can';
import type { Actor } from '../../domain/person/person';
import { fail, ok, type Outcome } from '../../domain/problem';
import type { Reading } from '../../domain/reading/reading';
import * as readingPool from './reading-pool';

/** Evidence that waits in a file. */
export interface ReadableFile {
	path: string;
	name: string;
}

/** The readings of every file, in the order in which they were given. Stores nothing. */
export async function read(actor: Actor, files: readonly ReadableFile[]): Promise<Outcome<Reading[]>> {
	if (!can(actor, 'reading.make')) return fail('forbidden', 'Your role does not allow reading evidence.');
	const read = await Promise.all(files.map((file) => readingPool.readFile(file.path, file.name, null)));
	return ok(read.flatMap(({ readings }) => readings));
}
