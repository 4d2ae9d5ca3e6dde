import { HIT_KINDS, type SearchHit } from '$lib/domain/search/search-hit';

/** Long enough that a word typed at speed asks once, short enough that nobody waits for it. */
const DEBOUNCE_MS = 120;
/** What fits under the box without scrolling on a small laptop. */
const LIMIT = 8;

/** The search as one types: asks when the fingers rest, drops an answer that came too late. */
export class Search {
	hits = $state.raw<SearchHit[]>([]);
	/** The words that `hits` answer; empty before the first answer. */
	answered = $state('');
	busy = $state(false);
	/** What went wrong with the last question; null: nothing. */
	failure = $state<string | null>(null);
	#timer: ReturnType<typeof setTimeout> | undefined;
	#running: AbortController | null = null;
	readonly #url: string;

	constructor(url: string) {
		this.#url = url;
	}

	/** Asks for the words shortly; a later call replaces it. Empty words clear the answer. */
	ask(words: string): void {
		this.stop();
		const wanted = words.trim();
		if (wanted === '') {
			this.hits = [];
			this.answered = '';
			this.failure = null;
			return;
		}
		this.busy = true;
		this.#timer = setTimeout(() => void this.#fetch(wanted), DEBOUNCE_MS);
	}

	/** Forgets the question under way; an answer already shown stays. */
	stop(): void {
		clearTimeout(this.#timer);
		this.#running?.abort();
		this.#running = null;
		this.busy = false;
	}

	async #fetch(words: string): Promise<void> {
		const control = new AbortController();
		this.#running = control;
		const answer = await readHits(
			`${this.#url}?q=${encodeURIComponent(words)}&limit=${LIMIT}`,
			control.signal
		);
		if (control.signal.aborted) return;
		this.busy = false;
		this.#running = null;
		this.answered = words;
		this.hits = answer ?? [];
		this.failure = answer === null ? 'The search did not answer. Press Enter to try the full page.' : null;
	}
}

async function readHits(url: string, signal: AbortSignal): Promise<SearchHit[] | null> {
	try {
		const response = await fetch(url, { signal, headers: { accept: 'application/json' } });
		if (!response.ok) return null;
		const body: unknown = await response.json();
		return typeof body === 'object' && body !== null && 'items' in body && Array.isArray(body.items)
			? body.items.filter(isHit)
			: null;
	} catch {
		// The network is down, or a newer question stopped this one: either way there is no answer.
		return null;
	}
}

function isHit(item: unknown): item is SearchHit {
	return (
		typeof item === 'object' &&
		item !== null &&
		'kind' in item &&
		HIT_KINDS.some((kind) => kind === item.kind) &&
		'url' in item &&
		typeof item.url === 'string' &&
		'snippet' in item &&
		Array.isArray(item.snippet)
	);
}
