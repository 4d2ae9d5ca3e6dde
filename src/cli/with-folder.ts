import type { Outcome } from '$lib/domain/problem';
import { config, overrideConfig } from '$lib/server/config';
import { closeDatabase, openDatabase, type Database } from '$lib/server/db/connection';

/** Runs work on the data folder of the settings, and closes it whatever comes of the work. */
export async function withFolder(
	work: (db: Database) => Promise<number>,
	options: { migrate?: boolean } = {}
): Promise<number> {
	// Standard output belongs to the verb's own answer.
	overrideConfig({ logLevel: 'silent' });
	const db = await openDatabase(config().dataDir, options);
	try {
		return await work(db);
	} finally {
		await closeDatabase();
	}
}

/** Prints an outcome's answer by `say` and answers 0, or its problem and answers 1. */
export function report<T>(outcome: Outcome<T>, say: (value: T) => string): number {
	if (outcome.ok) {
		console.log(say(outcome.value));
		return 0;
	}
	console.error(outcome.problem.detail);
	return 1;
}
