/** The encodings that pasted evidence arrives in; Latin-1 can hold any byte and is what is left. */
export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'latin1';

/** Decodes bytes and takes off the byte order mark. */
export function decodeAs(encoding: Encoding, bytes: Uint8Array): string {
	return new TextDecoder(encoding).decode(bytes);
}

/** Decodes a whole text that was pasted. */
export function decodeText(bytes: Uint8Array): string {
	return normalisePaste(decodeAs(encodingOf(bytes), bytes));
}

/** What word processors, chats and Windows put in the place of plain marks, put back; one character for one. */
export function normalisePaste(text: string): string {
	const plain = /[\u0080-\uffff]/.test(text)
		? text
				.replace(/[\u00a0\u2007\u202f\u3000]/g, ' ')
				.replace(/[\u201c\u201d\u201e\u201f]/g, '"')
				.replace(/[\u2018\u2019\u201a\u201b]/g, "'")
				.replace(/[\u200b\u2060\ufeff]/g, '')
		: text;
	return plain.includes('\r') ? plain.replace(/\r\n?/g, '\n') : plain;
}

/** The encoding of a file, judged from its first bytes. */
export function encodingOf(head: Uint8Array): Encoding {
	const [a, b] = head;
	if (a === 0xff && b === 0xfe) return 'utf-16le';
	if (a === 0xfe && b === 0xff) return 'utf-16be';
	const zeros = countZeros(head.subarray(0, 512));
	// Text in UTF-16 without its mark: nearly every second byte is zero.
	if (zeros.odd > 0.7 * zeros.pairs && zeros.even < 0.1 * zeros.pairs) return 'utf-16le';
	if (zeros.even > 0.7 * zeros.pairs && zeros.odd < 0.1 * zeros.pairs) return 'utf-16be';
	return isUtf8(head) ? 'utf-8' : 'latin1';
}

function countZeros(bytes: Uint8Array): { even: number; odd: number; pairs: number } {
	let even = 0;
	let odd = 0;
	const pairs = bytes.length >> 1;
	for (let i = 0; i < pairs * 2; i += 2) {
		if (bytes[i] === 0) even++;
		if (bytes[i + 1] === 0) odd++;
	}
	return { even, odd, pairs: Math.max(pairs, 1) };
}

function isUtf8(bytes: Uint8Array): boolean {
	// A head may end inside a character of up to four bytes.
	for (let cut = 0; cut < 4 && cut <= bytes.length; cut++) {
		try {
			new TextDecoder('utf-8', { fatal: true }).decode(bytes.subarray(0, bytes.length - cut));
			return true;
		} catch {
			// Try once more with a byte less.
		}
	}
	return false;
}
