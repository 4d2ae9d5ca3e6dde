import { parentPort } from 'node:worker_threads';
import { readEvidenceFile } from '../lib/server/readings/read-file';
import type { PoolAnswer, PoolAsk } from '../lib/server/readings/pool-messages';

const port = parentPort;
if (port === null) throw new Error('reading-worker is started by the reading pool, not by itself.');

async function answer({ id, file }: PoolAsk): Promise<PoolAnswer> {
	try {
		return { id, read: await readEvidenceFile(file) };
	} catch (error) {
		const message = error instanceof Error ? error.message : String(error);
		const code =
			error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : null;
		return { id, failed: { message, code } };
	}
}

port.on('message', (ask: PoolAsk) => {
	void answer(ask).then((message) => port.postMessage(message));
});
