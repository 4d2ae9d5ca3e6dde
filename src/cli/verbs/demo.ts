import { config, overrideConfig } from '$lib/server/config';
import { closeDatabase } from '$lib/server/db/connection';
import { prepareDemo } from '../demo-folder';
import { readArgs, type Verb } from '../verb';

export const demo: Verb = {
	help: `Usage: catchwater demo

Fills DATA_DIR with the demonstration. A folder that carries the demonstration's marker is left as it is; any
other that holds something is refused. "npm run demo" does this and starts the server.`,
	async run(args) {
		readArgs({ args, options: {} });
		const { dataDir } = overrideConfig({ logLevel: 'silent' });
		try {
			const result = await prepareDemo(dataDir);
			if (result === null) {
				console.error(`${dataDir} holds something else. Name an empty or a new folder in DATA_DIR.`);
				return 1;
			}
			console.log(`${config().dataDir}: ${result}`);
			return 0;
		} finally {
			await closeDatabase();
		}
	}
};
