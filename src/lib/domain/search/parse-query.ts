import { INCIDENT_STATES, type IncidentState } from '../incident/incident';
import { ENGINES, type Engine } from '../reading/reading';
import { SYMPTOM_IDS, type SymptomId } from '../symptom/symptom';

/** What a search asks for, read from the line that a person typed. */
export interface SearchQuery {
	/** Each must be met, by a prefix or with a typo in it. */
	words: string[];
	/** Typed in double quotes: met word by word, in order. */
	phrases: string[];
	/** Typed with a minus before: none of them may be in it. */
	excluded: string[];
	filters: SearchFilters;
	/** An incident's number, alone on the line ("412" or "#412"); null: none. */
	number: number | null;
}

/** Several values of one filter widen it. Times are UTC, RFC 3339. */
export interface SearchFilters {
	symptoms: SymptomId[];
	services: string[];
	engines: Engine[];
	states: IncidentState[];
	/** Began at or after. */
	since: string | null;
	/** Began before the end of that day. */
	until: string | null;
}

/** The longest line that is read; the rest is left out. */
const LONGEST_QUERY = 500;
const MOST_PARTS = 32;

/** `-key:"value"`, `"phrase"`, `-"phrase"`, `word`: one part of the line. */
const PART = /(-?)(?:([a-z]+):)?(?:"([^"]*)"?|([^\s"]+))/gi;

const DAY_MS = 86_400_000;

/**
 * Reads a search line. It never fails: a filter that it can't make sense of ("state:xyz", "since:soon") is
 * looked for as words. A value may be the beginning of an id ("state:op", "symptom:hash").
 */
export function parseQuery(line: string, now: Date): SearchQuery {
	const query: SearchQuery = {
		words: [],
		phrases: [],
		excluded: [],
		filters: { symptoms: [], services: [], engines: [], states: [], since: null, until: null },
		number: readNumber(line)
	};
	let parts = 0;
	for (const [, minus, key, phrase, word] of line.slice(0, LONGEST_QUERY).matchAll(PART)) {
		if (++parts > MOST_PARTS) break;
		const text = (phrase ?? word ?? '').trim();
		if (text === '') continue;
		if (key !== undefined && minus === '' && readFilter(query.filters, key.toLowerCase(), text, now))
			continue;
		const whole = key === undefined ? text : `${key} ${text}`;
		if (minus === '-') query.excluded.push(whole);
		else if (phrase !== undefined) query.phrases.push(whole);
		else query.words.push(whole);
	}
	return query;
}

/** True where a filter narrows the search to incidents. */
export function hasFilters({ filters }: SearchQuery): boolean {
	return (
		filters.symptoms.length + filters.services.length + filters.engines.length + filters.states.length > 0 ||
		filters.since !== null ||
		filters.until !== null
	);
}

function readNumber(line: string): number | null {
	const digits = /^\s*#?(\d{1,15})\s*$/.exec(line)?.[1];
	return digits === undefined ? null : Number(digits);
}

function readFilter(filters: SearchFilters, key: string, value: string, now: Date): boolean {
	switch (key) {
		case 'symptom':
			return addMatches(filters.symptoms, SYMPTOM_IDS, value);
		case 'engine':
			return addMatches(filters.engines, ENGINES, value);
		case 'state':
			return addMatches(filters.states, INCIDENT_STATES, value);
		case 'service':
			filters.services.push(value);
			return true;
		case 'since': {
			const day = readDay(value, now);
			if (day === null) return false;
			filters.since = day.toISOString();
			return true;
		}
		case 'until': {
			const day = readDay(value, now);
			if (day === null) return false;
			filters.until = new Date(day.getTime() + DAY_MS).toISOString();
			return true;
		}
		default:
			return false;
	}
}

/** Adds the id itself, or else all that begin with it. */
function addMatches<T extends string>(chosen: T[], ids: readonly T[], value: string): boolean {
	const wanted = value.toLowerCase().replaceAll(/[\s_]/g, '-');
	const exact = ids.filter((id) => id === wanted);
	const matches = exact.length > 0 ? exact : ids.filter((id) => id.startsWith(wanted));
	chosen.push(...matches.filter((id) => !chosen.includes(id)));
	return matches.length > 0;
}

/** The beginning of a day in UTC: "2026-03-01", "2026-03", "2026", "14d" (days ago), "today"; null: none of them. */
function readDay(value: string, now: Date): Date | null {
	const today = Date.UTC(now.getUTCFullYear(), now.getUTCMonth(), now.getUTCDate());
	if (value.toLowerCase() === 'today') return new Date(today);
	const ago = /^(\d{1,5})d$/i.exec(value)?.[1];
	if (ago !== undefined) return new Date(today - Number(ago) * DAY_MS);
	const [, year, month = '01', day = '01'] = /^(\d{4})(?:-(\d{2})(?:-(\d{2}))?)?$/.exec(value) ?? [];
	if (year === undefined) return null;
	const date = new Date(`${year}-${month}-${day}T00:00:00.000Z`);
	return Number.isNaN(date.getTime()) || !date.toISOString().startsWith(`${year}-${month}-${day}`)
		? null
		: date;
}
