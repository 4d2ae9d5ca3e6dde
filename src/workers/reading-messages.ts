import type { LogHints, Reading } from '../lib/domain/reading/reading';

/** What the page asks of the reading worker: one piece of evidence, told apart by its id. */
export interface ReadingAsk {
	id: number;
	name: string;
	content: string | File;
}

/** What the worker answers: how far it has come, and at the end what it read. */
export type ReadingAnswer =
	| { id: number; kind: 'progress'; bytesDone: number }
	| { id: number; kind: 'read'; readings: Reading[]; hints: LogHints | null }
	| { id: number; kind: 'failed' };
