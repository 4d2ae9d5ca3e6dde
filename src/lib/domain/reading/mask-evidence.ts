import { openEvidence } from './open-evidence';

/**
 * The evidence with its literals and likely secrets masked, as UTF-8. Masking what is masked changes nothing, and
 * reading it gives the same readings as reading the original. Files that are no text pass through unchanged.
 */
export async function* maskEvidence(
	source: AsyncIterable<Uint8Array>,
	_name: string
): AsyncIterable<Uint8Array> {
	const evidence = await openEvidence(source);
	if (evidence.kind === 'binary') {
		yield* evidence.chunks;
		return;
	}
	const encoder = new TextEncoder();
	for await (const piece of evidence.masked) yield encoder.encode(piece);
}
