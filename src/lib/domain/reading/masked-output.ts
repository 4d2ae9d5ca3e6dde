/** Text that grows at its end and is cut there, at a cost that doesn't depend on how much stands before. */
export class MaskedOutput {
	private readonly pieces: string[] = [];
	length = 0;
	/** The length without blanks at the end. */
	solidLength = 0;

	append(text: string): void {
		if (text === '') return;
		this.pieces.push(text);
		const solid = text.trimEnd().length;
		if (solid > 0) this.solidLength = this.length + solid;
		this.length += text.length;
	}

	/** Cuts everything behind a length; what is left must end in something else than a blank. */
	truncate(length: number): void {
		while (this.length > length) {
			const last = this.pieces.pop() ?? '';
			this.length -= last.length;
			if (this.length < length) {
				const kept = last.slice(0, length - this.length);
				this.pieces.push(kept);
				this.length = length;
			}
		}
		this.solidLength = length;
	}

	/** The end of the text, from a length on. */
	from(start: number): string {
		let at = this.length;
		let first = this.pieces.length;
		while (first > 0 && at > start) at -= this.pieces[--first]?.length ?? 0;
		return this.pieces
			.slice(first)
			.join('')
			.slice(start - at);
	}

	toString(): string {
		return this.pieces.join('');
	}
}
