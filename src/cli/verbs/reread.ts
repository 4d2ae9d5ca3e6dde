import { rereadAll } from '$lib/server/evidence/reread-evidence';
import { readArgs, type Verb } from '../verb';
import { withFolder } from '../with-folder';

export const reread: Verb = {
	help: `Usage: catchwater reread

Reads every stored piece of evidence again and puts the new readings in the place of the old ones, symptoms
and index with them. Evidence that cannot be read keeps its old readings and gets a line; exit 1 then.`,
	run(args) {
		readArgs({ args, options: {} });
		return withFolder(async () => {
			const { read, faults } = await rereadAll();
			for (const fault of faults) console.error(fault);
			console.log(`${read} pieces of evidence read`);
			return faults.length > 0 ? 1 : 0;
		});
	}
};
