import type { RunbookValues } from '$lib/domain/runbook/runbook-values';

/** A text that was typed on this device and not saved yet. */
export interface KeptRunbook {
	/** The revision that it was begun from; null: a new runbook. */
	revision: number | null;
	/** ISO 8601. */
	keptAt: string;
	values: RunbookValues;
}

const keyOf = (slug: string | null) => `catchwater.draft.runbook.${slug ?? ''}`;

/** Keeps what was typed; answers false where the device has no room for it. */
export function keepRunbook(slug: string | null, kept: KeptRunbook): boolean {
	try {
		localStorage.setItem(keyOf(slug), JSON.stringify(kept));
		return true;
	} catch (error) {
		// The browser's word for a full or closed store.
		if (error instanceof DOMException) return false;
		throw error;
	}
}

/** Forgets it: it was saved, or thrown away. */
export function forgetRunbook(slug: string | null): void {
	localStorage.removeItem(keyOf(slug));
}

/** What this device kept; null: nothing, or nothing that can be read. */
export function readKeptRunbook(slug: string | null): KeptRunbook | null {
	const text = localStorage.getItem(keyOf(slug));
	if (text === null) return null;
	const kept: unknown = JSON.parse(text);
	return isKept(kept) ? kept : null;
}

function isKept(value: unknown): value is KeptRunbook {
	if (typeof value !== 'object' || value === null) return false;
	const { revision, keptAt, values } = value as Record<string, unknown>;
	if (typeof keptAt !== 'string' || (revision !== null && typeof revision !== 'number')) return false;
	return isValues(values);
}

function isValues(value: unknown): boolean {
	if (typeof value !== 'object' || value === null) return false;
	const fields = value as Record<string, unknown>;
	const texts = ['title', 'summary', 'body', 'reviewEveryDays', 'note'];
	const lists = [fields.engines, fields.symptoms];
	return texts.every((name) => typeof fields[name] === 'string') && lists.every(Array.isArray);
}
