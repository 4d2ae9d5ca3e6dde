/** One mark on a staff gauge. */
export interface GaugeMark {
	/** expected: dashed; limit: the memory given; actual: what came or would have been needed. */
	kind: 'expected' | 'limit' | 'actual';
	value: number;
	/** "28 MB needed" */
	text: string;
	/** "hash table" */
	note?: string | null;
}

/** Two lines of twelve pixels and air. */
const LABEL_PX = 32;

/** Moves labels apart that would stand on each other, as little as possible, and keeps them between top and foot. */
export function spreadLabels<T extends { y: number }>(labels: readonly T[], top: number, foot: number): T[] {
	const placed = [...labels].sort((a, b) => a.y - b.y).map((label) => ({ ...label }));
	for (let i = 0; i < placed.length; i++) {
		const label = placed[i];
		const above = placed[i - 1];
		if (label === undefined) continue;
		label.y = Math.max(label.y, above === undefined ? top : above.y + LABEL_PX);
	}
	for (let i = placed.length - 1; i >= 0; i--) {
		const label = placed[i];
		const below = placed[i + 1];
		if (label === undefined) continue;
		label.y = Math.min(label.y, below === undefined ? foot : below.y - LABEL_PX);
	}
	return placed;
}
