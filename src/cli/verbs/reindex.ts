import { reindexAll } from '$lib/server/search/indexing';
import { readArgs, type Verb } from '../verb';
import { withFolder } from '../with-folder';

export const reindex: Verb = {
	help: `Usage: catchwater reindex

Builds the words and features of every incident and runbook anew from what is stored. The server may run
meanwhile; searches find less until it is done.`,
	run(args) {
		readArgs({ args, options: {} });
		return withFolder(async () => {
			const documents = await reindexAll();
			console.log(`${documents} documents indexed`);
			return 0;
		});
	}
};
