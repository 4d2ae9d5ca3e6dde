/** Distinct names counted; a log with more keeps what came first. */
const NAMES = 1_000;
const SHOWN = 10;

/** Counts names and ranks them. */
export class Tally {
	private readonly counts = new Map<string, number>();

	count(name: string | null): void {
		if (name === null || name === '' || name === '[unknown]') return;
		const known = this.counts.get(name);
		if (known !== undefined) this.counts.set(name, known + 1);
		else if (this.counts.size < NAMES) this.counts.set(name, 1);
	}

	/** The names, most frequent first. */
	ranked(): string[] {
		const pairs = [...this.counts].sort((a, b) => b[1] - a[1]);
		return pairs.slice(0, SHOWN).map(([name]) => name);
	}
}
