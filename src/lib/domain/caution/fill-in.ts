import type { Caution } from './caution';
import { findPlaceholders } from './placeholders';

/** A whole statement is pasted after copying, not typed into a line. */
const PASTED = 'rest_of_the_query';

/** What is to be filled in, by name: `{{join_column}}` → "join_column"; in the order of first appearance. */
export function listBlanks(texts: readonly string[]): string[] {
	const names = texts.flatMap((text) => findPlaceholders(text).map((whole) => whole.slice(2, -2).trim()));
	return [...new Set(names)].filter((name) => /^\w+$/.test(name) && name !== PASTED);
}

/** The text with its blanks filled in; one without a value stays as it is. */
export function fillIn(text: string, values: Readonly<Record<string, string>>): string {
	return text.replace(/\{\{([^{}\n]*)\}\}/g, (whole: string, name: string) => {
		const value = values[name.trim()]?.trim() ?? '';
		return value === '' ? whole : value;
	});
}

/** A caution that speaks of the things themselves: every text with its blanks filled in. */
export function fillCaution(caution: Caution, values: Readonly<Record<string, string>>): Caution {
	const fill = (text: string) => fillIn(text, values);
	const locks = caution.locks.map(({ mode, on }) => ({ mode, on: fill(on) }));
	return {
		...caution,
		sql: fill(caution.sql),
		locks,
		lock: locks[0] ?? null,
		cancel: fill(caution.cancel),
		undo: fill(caution.undo),
		load: fill(caution.load),
		precheck: caution.precheck.map(fill)
	};
}
