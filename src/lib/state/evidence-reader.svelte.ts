import type { LogHints, Reading } from '$lib/domain/reading/reading';
import type { ReadingAnswer, ReadingAsk } from '../../workers/reading-messages';
import { startReadingWorker } from './start-reading-worker';

/** One piece of evidence on the page, and what became of it. */
export class EvidencePiece {
	readonly id: number;
	readonly name: string;
	readonly content: string | File;
	readonly bytes: number;
	/** failed: the browser could not read it; the server may still be able to. */
	state = $state<'reading' | 'read' | 'failed'>('reading');
	bytesDone = $state(0);
	/** Empty until it is read. */
	readings = $state.raw<Reading[]>([]);
	hints = $state.raw<LogHints | null>(null);

	constructor(id: number, name: string, content: string | File) {
		this.id = id;
		this.name = name;
		this.content = content;
		this.bytes = typeof content === 'string' ? new TextEncoder().encode(content).length : content.size;
	}
}

/**
 * Reads evidence in a worker of this browser, by the same readEvidence that the server runs: nothing leaves
 * the page. What the server makes of it when it is saved is what counts.
 */
export class EvidenceReader {
	pieces = $state.raw<readonly EvidencePiece[]>([]);
	#worker: Worker | null = null;
	#lastId = 0;

	/** All that has been read so far, in the order in which it was given. */
	get readings(): Reading[] {
		return this.pieces.flatMap((piece) => piece.readings);
	}

	/** Whether anything is still being read. */
	get busy(): boolean {
		return this.pieces.some((piece) => piece.state === 'reading');
	}

	/** Starts the worker before the first piece comes, so that its reading doesn't wait for it. */
	warm(): void {
		this.#worker ??= this.#start();
	}

	/** Takes a piece and begins to read it. */
	add(name: string, content: string | File): EvidencePiece {
		const piece = new EvidencePiece(++this.#lastId, name, content);
		this.pieces = [...this.pieces, piece];
		this.#ask(piece);
		return piece;
	}

	/** Takes a piece away; one that is being read is stopped. */
	remove(piece: EvidencePiece): void {
		this.pieces = this.pieces.filter((other) => other.id !== piece.id);
		if (piece.state !== 'reading') return;
		// A worker can't be told to stop in the middle of a log: a new one takes up what is left.
		this.close();
		for (const waiting of this.pieces) if (waiting.state === 'reading') this.#ask(waiting);
	}

	/** Takes everything away. */
	clear(): void {
		if (this.busy) this.close();
		this.pieces = [];
	}

	/** Ends the worker; call when the page goes. */
	close(): void {
		this.#worker?.terminate();
		this.#worker = null;
	}

	#ask(piece: EvidencePiece): void {
		this.warm();
		const ask: ReadingAsk = { id: piece.id, name: piece.name, content: piece.content };
		piece.bytesDone = 0;
		this.#worker?.postMessage(ask);
	}

	#start(): Worker {
		const worker = startReadingWorker();
		worker.addEventListener('message', (event: MessageEvent<ReadingAnswer>) => this.#take(event.data));
		worker.addEventListener('error', () => {
			for (const piece of this.pieces) if (piece.state === 'reading') piece.state = 'failed';
		});
		return worker;
	}

	#take(answer: ReadingAnswer): void {
		const piece = this.pieces.find((known) => known.id === answer.id);
		if (piece === undefined) return;
		if (answer.kind === 'progress') {
			piece.bytesDone = answer.bytesDone;
			return;
		}
		piece.state = answer.kind;
		piece.bytesDone = piece.bytes;
		if (answer.kind === 'read') {
			piece.readings = answer.readings;
			piece.hints = answer.hints;
		}
	}
}
