/** Finds the first of several words in a text, each searched once as one goes along. */
export class NeedleFinder {
	private text = '';
	private readonly found: number[];

	constructor(private readonly needles: readonly string[]) {
		this.found = needles.map(() => -1);
	}

	/** Begins a new text. */
	begin(text: string): void {
		this.text = text;
		this.found.fill(-1);
	}

	/** Offset of the first needle from a place on; the length of the text where there is none. */
	next(from: number): number {
		let first = this.text.length;
		for (let i = 0; i < this.needles.length; i++) {
			let at = this.found[i] ?? -1;
			if (at < from) {
				const needle = this.needles[i] ?? '';
				at = this.text.indexOf(needle, from);
				if (at < 0) at = this.text.length;
				this.found[i] = at;
			}
			if (at < first) first = at;
		}
		return first;
	}
}
