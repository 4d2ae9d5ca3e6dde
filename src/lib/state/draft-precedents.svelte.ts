import type { Precedent } from '$lib/domain/precedent/precedent';
import type { RunbookSummary } from '$lib/domain/runbook/runbook';
import type { SymptomId } from '$lib/domain/symptom/symptom';

/** What the form holds so far. */
export interface DraftQuestion {
	text: string;
	service: string;
	engine: string;
	pieces: readonly { name: string; content: string | File; bytes: number }[];
	symptoms: readonly SymptomId[];
}

/** Long enough that a sentence typed at speed asks once. */
const DEBOUNCE_MS = 400;
/** A plan fits; of a long log its beginning is enough to recognise the statement. */
const MOST_BYTES = 512 * 1024;
const PRECEDENTS = 4;
const RUNBOOKS = 3;
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
				body: toForm(question),
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

function toForm(question: DraftQuestion): FormData {
	const form = new FormData();
	form.set('text', question.text);
	if (question.service !== '') form.set('service', question.service);
	if (question.engine !== '') form.set('engine', question.engine);
	for (const { name, content } of question.pieces)
		form.append('evidence', new Blob([content]).slice(0, MOST_BYTES), name);
	return form;
}

function toRunbookQuery(question: DraftQuestion): string {
	const query = new URLSearchParams({ state: 'published', limit: String(RUNBOOKS) });
	for (const symptom of question.symptoms) query.append('symptom', symptom);
	if (question.engine !== '' && question.engine !== 'unknown') query.set('engine', question.engine);
	return query.toString();
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
