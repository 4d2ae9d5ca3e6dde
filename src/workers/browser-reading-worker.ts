import { readEvidenceWithHints } from '$lib/domain/reading/read-evidence';
import type { ReadingAnswer, ReadingAsk } from './reading-messages';

/** Often enough for a bar to move, seldom enough to cost nothing beside the reading. */
const PROGRESS_EVERY_MS = 100;

function answer(message: ReadingAnswer): void {
	self.postMessage(message);
}

/** The bytes of a piece as they are read, with word of how far it has come. */
async function* readBytes({ id, content }: ReadingAsk): AsyncGenerator<Uint8Array> {
	const reader = new Blob([content]).stream().getReader();
	let bytesDone = 0;
	let lastWord = performance.now();
	for (let part = await reader.read(); !part.done; part = await reader.read()) {
		yield part.value;
		bytesDone += part.value.byteLength;
		if (performance.now() - lastWord < PROGRESS_EVERY_MS) continue;
		lastWord = performance.now();
		answer({ id, kind: 'progress', bytesDone });
	}
}

/** One after the other: two long logs at once would only hold each other up. */
let last: Promise<void> = Promise.resolve();

async function read(ask: ReadingAsk): Promise<void> {
	try {
		const { readings, hints } = await readEvidenceWithHints(readBytes(ask), ask.name);
		answer({ id: ask.id, kind: 'read', readings, hints });
	} catch (error) {
		// The file went away while it was read, or the browser ran out of memory. The page says so.
		answer({ id: ask.id, kind: 'failed' });
		throw error;
	}
}

self.addEventListener('message', (event: MessageEvent<ReadingAsk>) => {
	last = last.catch(() => undefined).then(() => read(event.data));
});
