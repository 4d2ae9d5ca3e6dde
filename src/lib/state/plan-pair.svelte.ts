import { compareReadings, nameComparison, type NamedComparison } from '$lib/domain/reading/compare-readings';
import { chooseReadings, type ReadingPair } from '$lib/domain/reading/comparison/choose-readings';
import type { EvidencePiece, EvidenceReader } from './evidence-reader.svelte';

export const SIDES = ['before', 'after'] as const;
export type Side = (typeof SIDES)[number];

/** Two pieces of evidence that are held beside each other in this browser. */
export class PlanPair {
	readonly #reader: EvidenceReader;
	#given = $state.raw<Record<Side, EvidencePiece | null>>({ before: null, after: null });
	#readings = $derived.by(() =>
		chooseReadings(this.on('before')?.readings ?? [], this.on('after')?.readings ?? [])
	);
	#comparison = $derived.by(() => {
		if (this.#readings === null) return null;
		const { before, after } = this.#readings;
		return nameComparison(compareReadings(before, after), before, after);
	});

	constructor(reader: EvidenceReader) {
		this.#reader = reader;
	}

	/** The readings that are compared; null while one side is missing or being read. */
	get readings(): ReadingPair | null {
		return this.#readings;
	}

	/** What changed between them; null while there is nothing to compare. */
	get comparison(): NamedComparison | null {
		return this.#comparison;
	}

	/** What was given for a side; null: nothing yet. */
	on(side: Side): EvidencePiece | null {
		const piece = this.#given[side];
		// Taken away where the page lists all pieces.
		return piece !== null && this.#reader.pieces.includes(piece) ? piece : null;
	}

	/** Takes what the page holds already: the piece that was looked at is before, another one after. */
	begin(first: EvidencePiece | null): void {
		if (first === null || this.on('before') !== null) return;
		const other = this.#reader.pieces.find((piece) => piece !== first) ?? null;
		this.#given = { before: first, after: this.on('after') ?? other };
	}

	/** Reads a piece for a side, in the place of what was there. */
	give(side: Side, name: string, content: string | File): void {
		this.remove(side);
		this.#given = { ...this.#given, [side]: this.#reader.add(name, content) };
	}

	/** Takes a piece away. */
	remove(side: Side): void {
		const piece = this.on(side);
		if (piece !== null) this.#reader.remove(piece);
		this.#given = { ...this.#given, [side]: null };
	}

	/** Exchanges the two. */
	swap(): void {
		this.#given = { before: this.#given.after, after: this.#given.before };
	}
}
