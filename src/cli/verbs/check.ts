import { checkFolder } from '$lib/server/integrity/check-folder';
import { readArgs, type Verb } from '../verb';
import { withFolder } from '../with-folder';

export const check: Verb = {
	help: `Usage: catchwater check

Reads the whole data folder and prints a line for each fault: a damaged database, a row that points at
nothing, an evidence file that is missing, changed or belongs to nothing, an index that is behind.
Exit 0 without a fault, 1 with one. Changes nothing.`,
	run(args) {
		readArgs({ args, options: {} });
		return withFolder(
			async (db) => {
				const { faults, checked } = await checkFolder(db);
				for (const fault of faults) console.log(fault);
				if (faults.length > 0) return 1;
				console.log(`no fault: ${checked.files} evidence files, ${checked.documents} documents in the index`);
				return 0;
			},
			{ migrate: false }
		);
	}
};
