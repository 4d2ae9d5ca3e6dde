import { createSHA256 } from 'hash-wasm';
import { prepareFingerprints } from './fingerprint';
import type { TextFormat } from './formats/format-reader';
import { openEvidence, type OpenEvidence } from './open-evidence';
import type { FormatResult, LogHints, Reading, ReadingWarning } from './reading';
import { emptyReading, toReadings, type EvidenceFile } from './to-reading';

/** What comes of reading one file, and what a log says of service, database and user for filling in a form. */
export interface EvidenceRead {
	readings: Reading[];
	hints: LogHints | null;
	/** Of the masked bytes. */
	sha256: string;
	bytes: number;
}

/**
 * Reads evidence: recognises the format by the content (never by the name), masks it and reads the masked text.
 * Never throws on input; what can't be read is said in the readings' warnings. At least one reading comes back.
 */
export async function readEvidence(source: AsyncIterable<Uint8Array>, name: string): Promise<Reading[]> {
	return (await processEvidence(source, name)).readings;
}

/** The readings with a log's hints. */
export async function readEvidenceWithHints(
	source: AsyncIterable<Uint8Array>,
	name: string
): Promise<{ readings: Reading[]; hints: LogHints | null }> {
	const { readings, hints } = await processEvidence(source, name);
	return { readings, hints };
}

/** Masks and reads in one pass; `keep` is given the masked bytes in order and is waited for. */
export async function processEvidence(
	source: AsyncIterable<Uint8Array>,
	name: string,
	keep: (masked: Uint8Array) => Promise<void> | void = () => undefined
): Promise<EvidenceRead> {
	await prepareFingerprints();
	const evidence = await openEvidence(source);
	const hash = (await createSHA256()).init();
	let bytes = 0;
	const sink = async (chunk: Uint8Array) => {
		bytes += chunk.length;
		hash.update(chunk);
		await keep(chunk);
	};
	const result = await readThrough(evidence, sink);
	const file: EvidenceFile = { name, bytes, sha256: hash.digest('hex') };
	return { ...describe(file, evidence, result), sha256: file.sha256, bytes };
}

type Sink = (chunk: Uint8Array) => Promise<void>;

async function readThrough(evidence: OpenEvidence, sink: Sink): Promise<FormatResult | null> {
	if (evidence.kind === 'binary') {
		for await (const chunk of evidence.chunks) await sink(chunk);
		return null;
	}
	const encoder = new TextEncoder();
	const reader = evidence.kind === 'stream' ? evidence.format.openReader() : null;
	let text = '';
	for await (const piece of evidence.masked) {
		await sink(encoder.encode(piece));
		if (reader !== null) reader.push(piece);
		else if (evidence.kind === 'text') text += piece;
	}
	if (reader !== null) return withoutFault(() => reader.finish());
	return evidence.kind === 'text' ? readText(evidence.format, text) : null;
}

/** Reads masked text in a known format; an unforeseen fault of a reader becomes a warning and loses nothing. */
export function readText(format: Pick<TextFormat, 'read'>, text: string): FormatResult {
	return withoutFault(() => format.read(text));
}

/**
 * A reader that meets what nobody foresaw must not lose the evidence: the fault is ours, the file is kept, and the
 * warning carries what went wrong for whoever mends the reader.
 */
function withoutFault(read: () => FormatResult): FormatResult {
	try {
		return read();
	} catch (fault) {
		const what = fault instanceof Error ? fault.message : String(fault);
		const message = `Catchwater's own reader failed on this file (${what}). The file is kept; send it to whoever runs Catchwater, and reread it after an update.`;
		return {
			plans: [],
			spills: null,
			hints: null,
			engineVersion: null,
			warnings: [{ code: 'reader-fault', message, at: null }]
		};
	}
}

function describe(
	file: EvidenceFile,
	evidence: OpenEvidence,
	result: FormatResult | null
): { readings: Reading[]; hints: LogHints | null } {
	if (evidence.kind === 'binary' || evidence.kind === 'unread' || result === null) {
		const warnings: ReadingWarning[] = 'warning' in evidence ? [evidence.warning] : [];
		return { readings: [{ ...emptyReading(file, 'unknown', 'unknown'), warnings }], hints: null };
	}
	return {
		readings: toReadings(file, evidence.format.format, evidence.format.kind, result),
		hints: result.hints
	};
}
