import { version } from '../../../../package.json';
import { database } from '../db/connection';
import { readSchema } from '../db/migrate';
import { log } from '../log';
import { indexState } from '../search/indexing';

export interface Health {
	status: 'ok';
	version: string;
	/** Name of the newest migration; null on an empty database. */
	schema: string | null;
	/** Things that can be found, and those whose index is older than they are. */
	index: { documents: number; behind: number };
}

/** What a watchdog asks; null when the database can't be reached. The one verb that is open to everybody. */
export async function read(): Promise<Health | null> {
	try {
		return { status: 'ok', version, schema: await readSchema(database()), index: await indexState() };
	} catch (error) {
		// Whatever keeps the database from answering is the answer; the log has the reason.
		log().error({ err: error }, 'the database cannot be reached');
		return null;
	}
}
