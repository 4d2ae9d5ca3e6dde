import type { Precedent } from '$lib/domain/precedent/precedent';
import type { RunbookSummary } from '$lib/domain/runbook/runbook';
import { toPrecedentForm, toRunbookQuery, type DraftQuestion } from './draft-question';

/** Long enough that a sentence typed at speed asks once. */
const DEBOUNCE_MS = 400;
const PRECEDENTS = 4;
/** Fewer letters resemble everything. */
const SHORTEST_TEXT = 4;

/** Precedents and runbooks for something that is not logged yet; an answer that comes too late is dropped. */
export class DraftPrecedents {
	items = $state.raw<Precedent[]>([]);
	runbooks = $state.raw<RunbookSummary[]>([]);
	busy = $state(false);
	/** What went wrong with the last question; null: nothing. */
	failure = $state<string | null>(null);
	/** Whether anything was asked yet. */
	asked = $state(false);
	#timer: ReturnType<typeof setTimeout> | undefined;
	#running: AbortController | null = null;
	readonly #urls: { precedents: string; runbooks: string };

	/** The addresses of the API that answer. */
	constructor(urls: { precedents: string; runbooks: string }) {
		this.#urls = urls;
	}

	/** Asks shortly; a later call replaces it. */
	ask(question: DraftQuestion): void {
		this.stop();
		if (question.text.trim().length < SHORTEST_TEXT && question.pieces.length === 0) {
			this.items = [];
			this.runbooks = [];
			this.asked = false;
			return;
		}
		this.busy = true;
		this.#timer = setTimeout(() => void this.#fetch(question), DEBOUNCE_MS);
	}

	/** Forgets the question under way. */
	stop(): void {
		clearTimeout(this.#timer);
		this.#running?.abort();
		this.#running = null;
		this.busy = false;
	}

	async #fetch(question: DraftQuestion): Promise<void> {
		const control = new AbortController();
		this.#running = control;
		const [precedents, runbooks] = await Promise.all([
			readItems<Precedent>(`${this.#urls.precedents}?limit=${PRECEDENTS}`, {
				method: 'POST',
				body: toPrecedentForm(question),
				signal: control.signal
			}),
			question.symptoms.length === 0
				? []
				: readItems<RunbookSummary>(`${this.#urls.runbooks}?${toRunbookQuery(question)}`, {
						signal: control.signal
					})
		]);
		if (control.signal.aborted) return;
		this.#running = null;
		this.busy = false;
		this.asked = true;
		this.failure =
			precedents === null ? 'Precedents did not answer; the incident can be logged all the same.' : null;
		if (precedents !== null) this.items = precedents;
		if (runbooks !== null) this.runbooks = runbooks;
	}
}

/** The items of a list that this application's own server sent; null: no answer. */
async function readItems<T>(url: string, init: RequestInit): Promise<T[] | null> {
	try {
		const response = await fetch(url, { ...init, headers: { accept: 'application/json' } });
		if (!response.ok) return null;
		const body = (await response.json()) as { items: T[] };
		return body.items;
	} catch {
		// The network is down, or a newer question stopped this one: either way there is no answer.
		return null;
	}
}
