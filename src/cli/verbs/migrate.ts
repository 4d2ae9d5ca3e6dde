import { migrateUp } from '$lib/server/db/migrate';
import { readArgs, type Verb } from '../verb';
import { withFolder } from '../with-folder';

export const migrate: Verb = {
	help: `Usage: catchwater migrate

Brings the tables of DATA_DIR up to date, all of it or nothing. The server does so at its start, too.`,
	run(args) {
		readArgs({ args, options: {} });
		return withFolder(
			async (db) => {
				const done = await migrateUp(db);
				console.log(done.length > 0 ? done.map((name) => `applied ${name}`).join('\n') : 'up to date');
				return 0;
			},
			{ migrate: false }
		);
	}
};
