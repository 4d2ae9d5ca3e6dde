import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { stem } from '$lib/domain/precedent/stem';
import { findWords, stemsOf } from '$lib/domain/precedent/tokens';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { bestFusedScore, fuseRankings } from '$lib/domain/search/fuse';
import { allOf } from '$lib/domain/search/match-expression';
import { hasFilters, parseQuery, type SearchQuery } from '$lib/domain/search/parse-query';
import type { HitKind, SearchHit } from '$lib/domain/search/search-hit';
import { matchesAny } from '$lib/domain/search/snippet';
import { asYouType } from './as-you-type';
import { describeHits } from './describe-hits';
import * as store from './search-store';

export interface SearchInput {
	q: string;
	kind?: HitKind | undefined;
	limit?: number | undefined;
	now?: Date;
}

const DEFAULT_LIMIT = 20;
const MOST_HITS = 200;
/** Each list is asked for more than is shown, so that what two lists hold in the middle can come to the top. */
const DEPTH_FACTOR = 3;
/** How long a search waits for the as-you-type index to load before it goes on without. */
const WAIT_FOR_LOAD_MS = 150;

/** What a place in each list counts. */
const SHORT_FIELDS_COUNT = 1;
const LONG_TEXT_COUNTS = 1;
const ENTRIES_COUNT = 0.6;

/**
 * Finds incidents, runbooks, symptoms and entries: one list, best first. An incident's number finds it first.
 * The last word may be unfinished, words may hold a typo. An empty line finds nothing; filters alone list
 * the newest incidents that pass them.
 */
export async function find(actor: Actor, input: SearchInput): Promise<Outcome<SearchHit[]>> {
	if (!can(actor, 'search.read')) return fail('forbidden', 'Searching needs a role that may read.');
	const query = parseQuery(input.q, input.now ?? new Date());
	const limit = Math.min(input.limit ?? DEFAULT_LIMIT, MOST_HITS);
	const ranked = await rank(query, limit * DEPTH_FACTOR);
	const wanted = ranked.filter(({ id }) => input.kind === undefined || kindOf(id) === input.kind);
	return ok(await describeHits(wanted, query, toWordTest(query), limit));
}

export interface RankedId {
	/** "incident:412", "runbook:slug", "symptom:id", "entry:7". */
	id: string;
	/** 0..1 */
	score: number;
}

export function kindOf(id: string): HitKind {
	const kind = id.slice(0, id.indexOf(':'));
	return kind === 'runbook' || kind === 'symptom' || kind === 'entry' ? kind : 'incident';
}

async function rank(query: SearchQuery, depth: number): Promise<RankedId[]> {
	const expression = toExpression(query);
	if (expression === null && query.words.length === 0) {
		const newest = hasFilters(query) ? await store.filterIncidents(query.filters, depth) : [];
		return newest.map((number, index) => ({ id: `incident:${number}`, score: 1 / (1 + index) }));
	}
	const [short, incidents, runbooks, entries] = await Promise.all([
		findShort(query, depth, 'find'),
		expression === null ? [] : store.matchIncidents(expression, query.filters, depth),
		expression === null ? [] : store.matchRunbooks(expression, depth),
		expression === null ? [] : store.matchEntries(expression, query.filters, depth)
	]);
	const isMet = short.length + incidents.length + runbooks.length + entries.length > 0;
	const fused = fuseRankings([
		// Typos are guessed at only where nothing is met as it was typed.
		{ ids: isMet ? short : await findShort(query, depth, 'guess'), weight: SHORT_FIELDS_COUNT },
		{ ids: incidents.map((number) => `incident:${number}`), weight: LONG_TEXT_COUNTS },
		{ ids: runbooks.map((slug) => `runbook:${slug}`), weight: LONG_TEXT_COUNTS },
		{ ids: entries.map((id) => `entry:${id}`), weight: ENTRIES_COUNT }
	]);
	const best = bestFusedScore([SHORT_FIELDS_COUNT, LONG_TEXT_COUNTS]);
	return putNumberFirst(
		fused.map(({ id, score }) => ({ id, score: score / best })),
		query.number
	);
}

/** An incident's number alone on the line means that incident, whatever else holds the digits. */
function putNumberFirst(ranked: readonly RankedId[], number: number | null): RankedId[] {
	if (number === null) return [...ranked];
	const id = `incident:${number}`;
	return [{ id, score: 1 }, ...ranked.filter((hit) => hit.id !== id)];
}

/** Ids from the short fields, best first; incidents only as far as they pass the filters. */
async function findShort(query: SearchQuery, depth: number, how: 'find' | 'guess'): Promise<string[]> {
	// Phrases and exclusions are questions to the full text; only words can be met by a beginning or a typo.
	if (query.words.length === 0 || query.phrases.length + query.excluded.length > 0) return [];
	const index = asYouType();
	await Promise.race([index.load(), new Promise((resolve) => setTimeout(resolve, WAIT_FOR_LOAD_MS))]);
	const hits = index[how](query.words, depth);
	if (!hasFilters(query)) return hits.map((hit) => `${hit.kind}:${hit.key}`);
	const numbers = hits.filter((hit) => hit.kind === 'incident').map((hit) => hit.key);
	const kept = await store.keepFiltered(numbers, query.filters);
	return hits
		.filter((hit) => hit.kind === 'runbook' || (hit.kind === 'incident' && kept.has(hit.key)))
		.map((hit) => `${hit.kind}:${hit.key}`);
}

/** The full-text expression for the words, phrases and exclusions; null: nothing to look for. */
function toExpression(query: SearchQuery): string | null {
	const finished = query.phrases.length > 0 ? query.words : query.words.slice(0, -1);
	const last = query.phrases.length > 0 ? undefined : query.words.at(-1);
	const lastWords = last === undefined ? [] : findWords(last).map((word) => word.text);
	const unfinished = lastWords.at(-1);
	return allOf({
		phrases: [...finished, ...query.phrases, lastWords.slice(0, -1).join(' ')].map(stemsOf),
		unfinished: unfinished === undefined ? null : { stem: stem(unfinished), beginning: unfinished },
		excluded: query.excluded.map(stemsOf)
	});
}

function toWordTest(query: SearchQuery) {
	const stems = new Set([...query.words, ...query.phrases].flatMap(stemsOf));
	const last = query.words.at(-1);
	const beginnings =
		last === undefined
			? []
			: findWords(last)
					.slice(-1)
					.map((word) => word.text);
	return matchesAny(stems, beginnings);
}
