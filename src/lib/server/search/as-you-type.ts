import MiniSearch, { type SearchOptions } from 'minisearch';
import { findNames, findWords } from '$lib/domain/precedent/tokens';
import { STOP_WORDS } from '$lib/domain/precedent/stop-words';
import { listSymptomTexts } from './symptom-texts';
import { database, type Database } from '$lib/server/db/connection';
import { listIncidentShorts, listRunbookShorts } from './as-you-type-store';

/** The short fields of one thing that can be found. */
export interface ShortDocument {
	/** "incident:412", "runbook:slug", "symptom:hash-spill". */
	id: string;
	kind: 'incident' | 'runbook' | 'symptom';
	/** Number, slug or id. */
	key: string;
	title: string;
	/** Service, database, engine. */
	place: string;
	symptoms: string;
	people: string;
}

export interface ShortHit {
	kind: ShortDocument['kind'];
	key: string;
}

/** Documents added before other work gets its turn: well under 50 ms on a slow machine. */
const CHUNK = 200;
/** A typo is allowed in words from this length on, two from the longer one on. */
const TYPO_FROM = 4;
const TWO_TYPOS_FROM = 8;
/** What a hit in each field counts. */
const BOOST = { key: 6, title: 3, symptoms: 1.5, place: 1.5, people: 1 };

/**
 * The index behind the search box: short fields of everything, in memory, met by beginnings and with typos.
 * It loads in the background, in chunks; until then the full-text index answers alone.
 */
export class AsYouType {
	readonly #index = new MiniSearch<ShortDocument>({
		fields: ['key', 'title', 'place', 'symptoms', 'people'],
		storeFields: ['kind', 'key'],
		tokenize: (text) => [...findWords(text).map((word) => word.text), ...findNames(text)],
		processTerm: (term) => (STOP_WORDS.has(term) ? null : term),
		searchOptions: {
			boost: BOOST,
			// Only the word being typed is unfinished.
			prefix: (_term, index, terms) => index === terms.length - 1,
			combineWith: 'AND'
		}
	});
	#loading: Promise<void> | null = null;

	/** Adds the document or puts it in the place of the one with its id. */
	put(document: ShortDocument): void {
		if (this.#index.has(document.id)) this.#index.replace(document);
		else this.#index.add(document);
	}

	/** Loads everything once; the same promise to all who ask. */
	load(): Promise<void> {
		this.#loading ??= this.#loadAll();
		return this.#loading;
	}

	async #loadAll(): Promise<void> {
		for (const { id, title, texts } of listSymptomTexts()) {
			this.put({
				id: `symptom:${id}`,
				kind: 'symptom',
				key: id,
				title,
				place: '',
				symptoms: texts.join(' '),
				people: ''
			});
		}
		for (const runbook of await listRunbookShorts()) this.#addNew(runbook);
		for (let above = 0; ;) {
			const page = await listIncidentShorts(above, CHUNK);
			for (const incident of page) this.#addNew(incident);
			const last = page.at(-1);
			if (last === undefined) return;
			above = Number(last.key);
			await new Promise((resolve) => setImmediate(resolve));
		}
	}

	/** What a change has put in since is newer than what was read. */
	#addNew(document: ShortDocument): void {
		if (!this.#index.has(document.id)) this.#index.add(document);
	}

	/** What meets all the words, the last one by its beginning; best first. */
	find(words: readonly string[], limit: number): ShortHit[] {
		return this.#search(words, limit, {});
	}

	/** What meets all the words with a typo or two; best first. Reads much of the index: for when nothing else is found. */
	guess(words: readonly string[], limit: number): ShortHit[] {
		return this.#search(words, limit, { fuzzy: allowTypos });
	}

	#search(words: readonly string[], limit: number, options: SearchOptions): ShortHit[] {
		return this.#index
			.search(words.join(' '), { ...options, tokenize: cutWords })
			.slice(0, limit)
			.map((result) => ({ kind: result.kind as ShortHit['kind'], key: String(result.key) }));
	}
}

function cutWords(text: string): string[] {
	return findWords(text).map((word) => word.text);
}

/** Typos allowed in a word, by its length. */
function allowTypos(term: string): number {
	return term.length >= TWO_TYPOS_FROM ? 2 : term.length >= TYPO_FROM ? 1 : 0;
}

/** One index for each open database; it goes when the database is closed. */
const indexes = new WeakMap<Database, AsYouType>();

/** The index of the open database, which begins to load when first asked for. */
export function asYouType(): AsYouType {
	const open = database();
	let index = indexes.get(open);
	if (index === undefined) {
		index = new AsYouType();
		indexes.set(open, index);
	}
	return index;
}
