import { binarySignature } from './binary-signature';
import { BOUNDS } from './bounds';
import { decodeAs, encodingOf, normalisePaste, type Encoding } from './decode-text';
import { describeUnknown } from './describe-unknown';
import type { StreamFormat, TextFormat } from './formats/format-reader';
import { STREAM_FORMATS, TEXT_FORMATS } from './formats/registry';
import { maskUnknown } from './masking/mask-unknown';
import type { ReadingWarning } from './reading';

/** Evidence whose format is known and whose bytes have not been read yet. */
export type OpenEvidence =
	| { kind: 'binary'; chunks: AsyncIterable<Uint8Array>; warning: ReadingWarning }
	| { kind: 'stream'; format: StreamFormat; masked: AsyncIterable<string> }
	| { kind: 'text'; format: TextFormat; masked: AsyncIterable<string> }
	| { kind: 'unread'; warning: ReadingWarning; masked: AsyncIterable<string> };

/** Looks at the beginning of evidence and says how the rest is to be read. */
export async function openEvidence(source: AsyncIterable<Uint8Array>): Promise<OpenEvidence> {
	const iterator = source[Symbol.asyncIterator]();
	const head = await takeHead(iterator);
	const chunks = rest(head, iterator);
	const encoding = encodingOf(head);
	const binary = encoding.startsWith('utf-16') ? null : binarySignature(head);
	if (binary !== null) {
		const message = `This is ${binary.what}. ${binary.help}`;
		return { kind: 'binary', chunks, warning: { code: 'not-text', message, at: null } };
	}
	const text = normalisePaste(decodeAs(encoding, head.subarray(0, BOUNDS.headBytes)));
	const stream = STREAM_FORMATS.find((format) => format.recognise(text));
	if (stream !== undefined)
		return { kind: 'stream', format: stream, masked: maskStream(stream, decode(chunks, encoding)) };
	return openText(text, chunks, encoding);
}

async function openText(
	head: string,
	chunks: AsyncIterable<Uint8Array>,
	encoding: Encoding
): Promise<OpenEvidence> {
	const whole = await collect(chunks);
	const format = TEXT_FORMATS.find((each) => each.recognise(head));
	if (whole.more !== null) {
		const message = `The file is larger than ${BOUNDS.planBytes / 1024 ** 2} MB. It was kept, but no plan of that size is read.`;
		const pieces = decode(joined(whole.bytes, whole.more), encoding);
		return { kind: 'unread', warning: { code: 'too-large', message, at: null }, masked: maskLines(pieces) };
	}
	const text = normalisePaste(decodeAs(encoding, whole.bytes));
	if (format === undefined) {
		// Judged by the masked text, so that it is described alike when it is read again.
		const masked = maskUnknown(text);
		return {
			kind: 'unread',
			warning: describeUnknown(masked.slice(0, BOUNDS.headBytes)),
			masked: once(masked)
		};
	}
	return { kind: 'text', format, masked: once(format.mask(text)) };
}

async function takeHead(iterator: AsyncIterator<Uint8Array>): Promise<Uint8Array> {
	const parts: Uint8Array[] = [];
	let length = 0;
	while (length < BOUNDS.headBytes) {
		const next = await iterator.next();
		if (next.done === true) break;
		parts.push(next.value);
		length += next.value.length;
	}
	return concatenate(parts, length);
}

async function* rest(head: Uint8Array, iterator: AsyncIterator<Uint8Array>): AsyncIterable<Uint8Array> {
	if (head.length > 0) yield head;
	for (let next = await iterator.next(); next.done !== true; next = await iterator.next()) yield next.value;
}

const PIECE_BYTES = 256 * 1024;

async function* joined(first: Uint8Array, more: AsyncIterable<Uint8Array>): AsyncIterable<Uint8Array> {
	// In pieces: masking holds each as a list of its lines.
	for (let at = 0; at < first.length; at += PIECE_BYTES) yield first.subarray(at, at + PIECE_BYTES);
	yield* more;
}

/** Up to the bound of a plan, and what comes behind it: null when that was all. */
async function collect(
	chunks: AsyncIterable<Uint8Array>
): Promise<{ bytes: Uint8Array; more: AsyncIterable<Uint8Array> | null }> {
	const iterator = chunks[Symbol.asyncIterator]();
	const parts: Uint8Array[] = [];
	let length = 0;
	for (let next = await iterator.next(); next.done !== true; next = await iterator.next()) {
		parts.push(next.value);
		length += next.value.length;
		if (length > BOUNDS.planBytes) {
			return { bytes: concatenate(parts, length), more: rest(new Uint8Array(0), iterator) };
		}
	}
	return { bytes: concatenate(parts, length), more: null };
}

function concatenate(parts: Uint8Array[], length: number): Uint8Array {
	const [only] = parts;
	if (parts.length === 1 && only !== undefined) return only;
	const all = new Uint8Array(length);
	let at = 0;
	for (const part of parts) {
		all.set(part, at);
		at += part.length;
	}
	return all;
}

async function* decode(chunks: AsyncIterable<Uint8Array>, encoding: Encoding): AsyncIterable<string> {
	const decoder = new TextDecoder(encoding);
	for await (const chunk of chunks) yield decoder.decode(chunk, { stream: true });
	const last = decoder.decode();
	if (last !== '') yield last;
}

async function* maskStream(format: StreamFormat, pieces: AsyncIterable<string>): AsyncIterable<string> {
	const masker = format.openMasker();
	for await (const piece of pieces) {
		const masked = masker.push(piece);
		if (masked !== '') yield masked;
	}
	const last = masker.end();
	if (last !== '') yield last;
}

/** Text that is too large to be held, masked some lines at a time. */
async function* maskLines(pieces: AsyncIterable<string>): AsyncIterable<string> {
	let open = '';
	for await (const piece of pieces) {
		open += piece;
		const end = open.lastIndexOf('\n') + 1;
		if (end === 0 && open.length < BOUNDS.planBytes / 16) continue;
		yield maskUnknown(normalisePaste(end === 0 ? open : open.slice(0, end)));
		open = end === 0 ? '' : open.slice(end);
	}
	if (open !== '') yield maskUnknown(normalisePaste(open));
}

async function* once(text: string): AsyncIterable<string> {
	if (text !== '') yield text;
}
