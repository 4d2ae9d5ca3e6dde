import type { IncidentFilter } from '$lib/domain/incident/incident-filter';
import type { Actor } from '$lib/domain/person/person';
import { findWords, stemsOf } from '$lib/domain/precedent/tokens';
import { allOf } from '$lib/domain/search/match-expression';
import { parseQuery, type SearchQuery } from '$lib/domain/search/parse-query';
import type { ListFilter } from './incident-list-store';

/** What the full-text index is asked for; null: no word in it can be looked for. */
function toMatch(query: SearchQuery): string | null {
	const last = query.words.at(-1);
	const beginning = last === undefined ? undefined : [...findWords(last)].at(-1)?.text;
	const finished = last === undefined ? [] : query.words.slice(0, -1);
	return allOf({
		phrases: [...finished, ...query.phrases].map(stemsOf),
		unfinished:
			last === undefined || beginning === undefined
				? null
				: { stem: stemsOf(last)[0] ?? beginning, beginning },
		excluded: query.excluded.map(stemsOf)
	});
}

/**
 * A filter as the store takes it: `me` is the actor, and the text is read like a line of the search box,
 * filters in it ("state:open", "#412") included. What the filter's own fields say wins.
 */
export function toListFilter(actor: Actor, filter: IncidentFilter, now: Date): ListFilter {
	const query = parseQuery(filter.q ?? '', now);
	const { symptoms, services, engines, states, since, until } = query.filters;
	return {
		sort: filter.sort,
		limit: filter.limit,
		state: filter.state.length > 0 ? filter.state : states,
		severity: filter.severity,
		service: filter.service.length > 0 ? filter.service : services,
		engine: filter.engine.length > 0 ? filter.engine : engines,
		symptom: filter.symptom.length > 0 ? filter.symptom : symptoms,
		owner: filter.owner === 'me' ? (actor.personId ?? 'none') : (filter.owner ?? null),
		from: filter.from ?? since ?? undefined,
		to: filter.to ?? until ?? undefined,
		number: query.number,
		match: query.number === null ? toMatch(query) : null
	};
}
