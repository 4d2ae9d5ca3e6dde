/** Starts the worker that reads evidence in the browser. */
export function startReadingWorker(): Worker {
	return new Worker(new URL('../../workers/browser-reading-worker.ts', import.meta.url), { type: 'module' });
}
