import { invalidateAll } from '$app/navigation';
import { FormSending } from './send-form.svelte';

/** One piece of evidence on its way to an incident. */
export class SentPiece {
	readonly id: number;
	readonly name: string;
	readonly sending = new FormSending();
	/** Why it did not arrive; null: it is under way. */
	failure = $state<string | null>(null);

	constructor(id: number, name: string) {
		this.id = id;
		this.name = name;
	}
}

/** Sends evidence to a form action, one piece after the other, and has the page drawn anew as each arrives. */
export class EvidenceSending {
	pieces = $state.raw<readonly SentPiece[]>([]);
	/** What arrived last, for the status line. */
	said = $state('');
	#lastId = 0;
	#tail: Promise<void> = Promise.resolve();
	readonly #action: string;

	constructor(action: string) {
		this.#action = action;
	}

	/** Takes a piece and sends it when those before it have arrived. */
	take(name: string, content: string | File): void {
		const piece = new SentPiece(++this.#lastId, name);
		this.pieces = [...this.pieces, piece];
		this.#tail = this.#tail.then(() => this.#send(piece, content));
	}

	/** Forgets a piece; one that is under way is stopped. */
	remove(piece: SentPiece): void {
		piece.sending.stop();
		this.pieces = this.pieces.filter(({ id }) => id !== piece.id);
	}

	async #send(piece: SentPiece, content: string | File): Promise<void> {
		if (!this.pieces.includes(piece)) return;
		const body = new FormData();
		body.append('evidence', new Blob([content]), piece.name);
		const result = await piece.sending.send(this.#action, body);
		if (result?.type === 'redirect') {
			this.remove(piece);
			this.said = `${piece.name} is added.`;
			await invalidateAll();
			return;
		}
		if (result === null) piece.failure = 'The connection broke. Remove it and add it again.';
		else if (result.type === 'failure') piece.failure = sayProblem(result.data);
		else piece.failure = 'The server did not take it. Try again.';
	}
}

function sayProblem(data: unknown): string {
	const problem =
		typeof data === 'object' && data !== null && 'problem' in data ? (data.problem as object) : {};
	return 'detail' in problem && typeof problem.detail === 'string' ? problem.detail : 'It was not taken.';
}
