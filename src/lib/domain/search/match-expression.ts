/**
 * Builds expressions for FTS5's MATCH. Terms are always written as strings ("…", quotes doubled), so nothing
 * that a person types can become an operator, a column or a syntax error.
 */

/** One term as FTS5 takes it; null: nothing of it could ever be in the index. */
function quote(term: string): string | null {
	const clean = term.replaceAll('\0', '');
	return /[\p{L}\p{N}]/u.test(clean) ? `"${clean.replaceAll('"', '""')}"` : null;
}

function isString(value: string | null): value is string {
	return value !== null;
}

/** Any of the terms; null: none can be looked for. A term that is listed twice counts twice in bm25(). */
export function anyOf(terms: readonly string[]): string | null {
	const quoted = terms.map(quote).filter(isString);
	return quoted.length === 0 ? null : quoted.join(' OR ');
}

export interface MatchParts {
	/** Each must occur: terms in this order, one right behind the other. A single word is a phrase of one. */
	phrases: readonly (readonly string[])[];
	/** The word still being typed: its stem, or anything that begins like it; null: none. */
	unfinished: { stem: string; beginning: string } | null;
	/** None of these phrases may occur. */
	excluded: readonly (readonly string[])[];
}

/** All of the parts; null: nothing to look for (exclusions alone match nothing). */
export function allOf(parts: MatchParts): string | null {
	const wanted = parts.phrases.map(toPhrase).filter(isString);
	if (parts.unfinished !== null) {
		const { stem, beginning } = parts.unfinished;
		const begun = quote(beginning);
		const alternatives = [quote(stem), begun === null ? null : `${begun} *`].filter(isString);
		if (alternatives.length > 0) wanted.push(alternatives.join(' OR '));
	}
	if (wanted.length === 0) return null;
	const all = wanted.map((part) => `(${part})`).join(' AND ');
	const unwanted = parts.excluded.map(toPhrase).filter(isString);
	return unwanted.reduce((expression, phrase) => `(${expression}) NOT (${phrase})`, all);
}

function toPhrase(terms: readonly string[]): string | null {
	const quoted = terms.map(quote).filter(isString);
	return quoted.length === 0 ? null : quoted.join(' + ');
}
