import type { SearchQuery } from '$lib/domain/search/parse-query';
import type { SearchHit } from '$lib/domain/search/search-hit';
import { cutSnippet, type WordTest } from '$lib/domain/search/snippet';
import { findWords } from '$lib/domain/precedent/tokens';
import type { RankedId } from './search-service';
import * as store from './search-store';
import { listSymptomTexts } from './symptom-texts';

/** Everything of a hit but its score. */
type Described = Omit<SearchHit, 'score'>;

/**
 * Turns ranked ids into hits with title, address and snippet, at most `limit`. What is gone, or stands under a
 * filter that it can't meet, is left out; an entry is left out where its incident already stands above it.
 */
export async function describeHits(
	ranked: readonly RankedId[],
	query: SearchQuery,
	isMet: WordTest,
	limit: number
): Promise<SearchHit[]> {
	const hits: SearchHit[] = [];
	const shown = new Set<string>();
	// Mostly the first `limit` are all that is shown; what comes behind is read when one of them falls out.
	for (let from = 0; from < ranked.length && hits.length < limit; from += limit) {
		const part = ranked.slice(from, from + limit);
		const described = await describeAll(part, query, isMet);
		for (const { id, score } of part) {
			const hit = described.get(id);
			if (hit === undefined || hits.length >= limit) continue;
			const page = hit.url.replace(/#.*$/, '');
			if (hit.kind === 'entry' && shown.has(page)) continue;
			shown.add(page);
			hits.push({ ...hit, score: Math.min(1, Math.round(score * 1000) / 1000) });
		}
	}
	return hits;
}

async function describeAll(
	ranked: readonly RankedId[],
	query: SearchQuery,
	isMet: WordTest
): Promise<Map<string, Described>> {
	const [incidents, runbooks, entries] = await Promise.all([
		store.readIncidentTexts(keysOf(ranked, 'incident')),
		store.readRunbookTexts(keysOf(ranked, 'runbook')),
		store.readEntryTexts(keysOf(ranked, 'entry'))
	]);
	const described = new Map<string, Described>();
	for (const { key, title, texts } of incidents) {
		const snippet = bestSnippet(texts, isMet);
		described.set(`incident:${key}`, { kind: 'incident', id: key, title, url: `/incidents/${key}`, snippet });
	}
	for (const { key, title, texts, incident } of entries) {
		const url = `/incidents/${incident}#entry-${key}`;
		described.set(`entry:${key}`, { kind: 'entry', id: key, title, url, snippet: bestSnippet(texts, isMet) });
	}
	for (const runbook of runbooks) {
		if (!passesFilters(runbook, query)) continue;
		const { key, title, texts } = runbook;
		const snippet = bestSnippet(texts, isMet);
		described.set(`runbook:${key}`, { kind: 'runbook', id: key, title, url: `/runbooks/${key}`, snippet });
	}
	const symptoms = new Set(keysOf(ranked, 'symptom'));
	for (const { id: key, title, texts } of listSymptomTexts()) {
		if (!symptoms.has(key)) continue;
		const snippet = bestSnippet(texts, isMet);
		described.set(`symptom:${key}`, { kind: 'symptom', id: key, title, url: `/symptoms/${key}`, snippet });
	}
	return described;
}

function keysOf(ranked: readonly RankedId[], kind: string): string[] {
	return ranked.filter(({ id }) => id.startsWith(`${kind}:`)).map(({ id }) => id.slice(kind.length + 1));
}

/** A runbook has symptoms and engines to be filtered by, but neither service nor state of an incident nor a start. */
function passesFilters(
	runbook: { engines: string[]; symptoms: string[] },
	{ filters }: SearchQuery
): boolean {
	if (
		filters.services.length + filters.states.length > 0 ||
		filters.since !== null ||
		filters.until !== null
	) {
		return false;
	}
	const hasAny = (own: readonly string[], wanted: readonly string[]) =>
		wanted.length === 0 || wanted.some((id) => own.includes(id));
	return hasAny(runbook.symptoms, filters.symptoms) && hasAny(runbook.engines, filters.engines);
}

/** The snippet of the text in which most different words were met; of the first one where none was. */
function bestSnippet(texts: readonly string[], isMet: WordTest): SearchHit['snippet'] {
	const counted = texts
		.filter((text) => text.trim() !== '')
		.map((text) => ({
			text,
			met: new Set(
				findWords(text)
					.filter(isMet)
					.map((word) => word.text)
			).size
		}));
	const best = counted.reduce<(typeof counted)[number] | null>(
		(found, next) => (found === null || next.met > found.met ? next : found),
		null
	);
	return best === null ? [] : cutSnippet(best.text, isMet);
}
