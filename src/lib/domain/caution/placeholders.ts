/** `{{table}}`: what the person who follows the runbook puts in. Spaces inside the braces are allowed. */
const PLACEHOLDER = /\{\{([^{}\n]*)\}\}/g;
const STAND_IN = /__([a-z0-9_]+)__/g;

/** Placeholders of a text in the order of their first appearance, braces included. */
export function findPlaceholders(text: string): string[] {
	return [...new Set(text.match(PLACEHOLDER) ?? [])];
}

/**
 * Puts an identifier of exactly the same length in bytes of UTF-8 in each placeholder's place (`{{table}}` →
 * `__table__`), so that a parser accepts the statement and its positions still hold in the original.
 */
export function fillPlaceholders(text: string): string {
	return text.replace(PLACEHOLDER, (whole: string, name: string) => standIn(name, whole));
}

/**
 * What turns the identifiers of fillPlaceholders back into what was written. Made once a script: a script of
 * thousands of statements would otherwise be looked through once for each.
 */
export function placeholderRestorer(original: string): (text: string) => string {
	const written = new Map(
		findPlaceholders(original).map((whole) => [standIn(whole.slice(2, -2), whole).toLowerCase(), whole])
	);
	if (written.size === 0) return (text) => text;
	return (text) => text.replace(STAND_IN, (found: string) => written.get(found.toLowerCase()) ?? found);
}

/** Turns the identifiers of fillPlaceholders in one text back into what was written. */
export function restorePlaceholders(text: string, original: string): string {
	return placeholderRestorer(original)(text);
}

function standIn(name: string, whole: string): string {
	const length = new TextEncoder().encode(whole).length;
	const word = name.replace(/[^A-Za-z0-9_]/g, '_').toLowerCase();
	return `__${word}__`.padEnd(length, '_');
}
