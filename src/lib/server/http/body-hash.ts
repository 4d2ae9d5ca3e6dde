import { createHash, type Hash } from 'node:crypto';

/** The boundary of a multipart body; null for any other. */
function findBoundary(contentType: string): Buffer | null {
	const match = /^multipart\/.*?boundary=(?:"([^"]+)"|([^\s;]+))/i.exec(contentType);
	const boundary = match?.[1] ?? match?.[2];
	return boundary ? Buffer.from(boundary, 'latin1') : null;
}

/**
 * Hashes a body as it passes. A multipart boundary is left out: clients take a new one at each try, and the
 * same files sent again are the same body.
 */
export class BodyHash {
	readonly #hash: Hash = createHash('sha256');
	readonly #boundary: Buffer | null;
	/** The end of what has passed, in which a boundary may have begun. */
	#held: Buffer = Buffer.alloc(0);

	constructor(contentType: string) {
		this.#boundary = findBoundary(contentType);
	}

	update(chunk: Uint8Array): void {
		if (!this.#boundary) {
			this.#hash.update(chunk);
			return;
		}
		const boundary = this.#boundary;
		let rest = Buffer.concat([this.#held, chunk]);
		for (let at = rest.indexOf(boundary); at >= 0; at = rest.indexOf(boundary)) {
			this.#hash.update(rest.subarray(0, at));
			rest = rest.subarray(at + boundary.length);
		}
		const sure = Math.max(0, rest.length - boundary.length + 1);
		this.#hash.update(rest.subarray(0, sure));
		this.#held = rest.subarray(sure);
	}

	/** The hash in hex; call once, at the end. */
	finish(): string {
		return this.#hash.update(this.#held).digest('hex');
	}
}
