import { sizingInput, type SizingInput } from '$lib/domain/sizing/sizing';

const NUMBERS = ['rows', 'width', 'memoryKb', 'hashMemMultiplier', 'sessions'] as const;

/** The panel's figures out of the page's address, as its form sends them; null: none, or figures that don't fit. */
export function readSizingQuery(query: URLSearchParams): SizingInput | null {
	const figures: Record<string, unknown> = { kind: query.get('kind') };
	for (const name of NUMBERS) {
		const text = query.get(name);
		if (text !== null && text !== '') figures[name] = Number(text);
	}
	const read = sizingInput.safeParse(figures);
	return read.success ? read.data : null;
}
