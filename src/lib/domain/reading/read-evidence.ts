import { createSHA256 } from 'hash-wasm';
import { BOUNDS } from './bounds';
import { decodeText } from './decode-text';
import { prepareFingerprints } from './fingerprint';
import { TEXT_FORMATS } from './formats/registry';
import type { LogHints, Reading } from './reading';
import { emptyReading, toReadings, type EvidenceFile } from './to-reading';

/**
 * Reads evidence: recognises the format by the content (never by the name), masks it and reads the masked text.
 * Never throws on input; what can't be read is said in the readings' warnings. At least one reading comes back.
 */
export async function readEvidence(source: AsyncIterable<Uint8Array>, name: string): Promise<Reading[]> {
	return (await readEvidenceWithHints(source, name)).readings;
}

/** The readings, and what a log says of service, database and user, for filling in a form. */
export async function readEvidenceWithHints(
	source: AsyncIterable<Uint8Array>,
	name: string
): Promise<{ readings: Reading[]; hints: LogHints | null }> {
	await prepareFingerprints();
	const text = decodeText(await collect(source));
	const format = TEXT_FORMATS.find((each) => each.recognise(text.slice(0, BOUNDS.headBytes)));
	const masked = format === undefined ? text : format.mask(text);
	const bytes = new TextEncoder().encode(masked);
	const sha256 = (await createSHA256()).init().update(bytes).digest('hex');
	const file: EvidenceFile = { name, bytes: bytes.length, sha256 };
	if (format === undefined) return { readings: [emptyReading(file, 'unknown', 'unknown')], hints: null };
	const result = format.read(masked);
	return { readings: toReadings(file, format.format, format.kind, result), hints: result.hints };
}

async function collect(source: AsyncIterable<Uint8Array>): Promise<Uint8Array> {
	const chunks: Uint8Array[] = [];
	let length = 0;
	for await (const chunk of source) {
		chunks.push(chunk);
		length += chunk.length;
	}
	const all = new Uint8Array(length);
	let at = 0;
	for (const chunk of chunks) {
		all.set(chunk, at);
		at += chunk.length;
	}
	return all;
}
