import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import multer, { MulterError, type StorageEngine } from 'multer';
import { fail, ok, type Outcome, type Problem } from '$lib/domain/problem';
import { BodyTooLarge, maxUploadBytes, readLimited, refuseOversized, refuseTooLarge } from './body-limit';
import { isStorageFault, makeSpoolPath, PRIVATE_FILE, removeFromSpool } from './spool';
import { cleanName, type Upload } from './upload';

/** What a multipart request brought. */
export interface Received {
	/** Files of the asked-for field, and texts pasted under its name. */
	uploads: Upload[];
	/** The same for each field of `more`. */
	more: Record<string, Upload[]>;
	/** The other fields; of one given twice, the last. */
	fields: Record<string, string>;
}

export interface ReceiveOptions {
	/** Name of the field that carries files. */
	field: string;
	/** Further fields that carry files, each for itself. */
	more?: readonly string[];
	/** Fields of text that programs like to send as a file of JSON. */
	documents?: readonly string[];
}

const MOST_FILES = 50;
/** Fields are held in memory until the request has ended: thirty of eight megabytes at the very most. */
const MOST_FIELDS = 30;
const MOST_FIELD_BYTES = 8 * 1024 * 1024;
/** A document is text to be validated, not evidence: a narrative of 200,000 characters fits four times. */
const MOST_DOCUMENT_BYTES = 4 * 1024 * 1024;

/** What multer reads of a request, and writes to it. */
type MulterRequest = Parameters<ReturnType<ReturnType<typeof multer>['fields']>>[0];
type MulterResponse = Parameters<ReturnType<ReturnType<typeof multer>['fields']>>[1];

/** A file in the spool and the field that it came under. */
interface Spooled extends Upload {
	field: string;
}

/** Files of one request: written beside each other, and taken back together when it fails. */
class SpoolStorage implements StorageEngine {
	/** By the order in which they came: a short file is written before a long one that came first. */
	readonly #spooled = new Map<number, Spooled>();
	#arrived = 0;
	readonly #paths: string[] = [];
	#failed = false;

	_handleFile(
		_request: MulterRequest,
		file: Express.Multer.File,
		done: (error?: unknown, info?: Partial<Express.Multer.File>) => void
	): void {
		this.add(file.stream, file.fieldname, file.originalname, file.mimetype).then(
			(spooled) => done(null, { path: spooled.path, size: spooled.bytes }),
			(error: unknown) => done(error)
		);
	}

	_removeFile(_request: MulterRequest, file: Express.Multer.File, done: (error: Error | null) => void): void {
		removeFromSpool([file.path]).then(
			() => done(null),
			(error: Error) => done(error)
		);
	}

	/** Writes a stream into the spool, hashed on the way. */
	async add(stream: Readable, field: string, name: string, mimeType: string): Promise<Spooled> {
		const place = this.#arrived++;
		const path = await makeSpoolPath('raw');
		this.#paths.push(path);
		const hash = createHash('sha256');
		let bytes = 0;
		const measure = new Transform({
			transform(chunk: Buffer, _encoding, next) {
				hash.update(chunk);
				bytes += chunk.byteLength;
				next(null, chunk);
			}
		});
		try {
			await pipeline(stream, measure, createWriteStream(path, { flags: 'wx', mode: PRIVATE_FILE }));
		} finally {
			if (this.#failed) await removeFromSpool([path]);
		}
		const spooled: Spooled = {
			field,
			path,
			name: cleanName(name, 'evidence'),
			bytes,
			mimeType,
			rawSha256: hash.digest('hex')
		};
		this.#spooled.set(place, spooled);
		return spooled;
	}

	/** The files in the order in which they came. */
	list(): Spooled[] {
		return [...this.#spooled].sort(([one], [other]) => one - other).map(([, spooled]) => spooled);
	}

	/** Takes back whatever was written, now and by writes still under way. */
	async takeBack(): Promise<void> {
		this.#failed = true;
		await removeFromSpool(this.#paths);
	}
}

const SIZE_LIMITS = new Set(['LIMIT_FILE_SIZE', 'LIMIT_FILE_COUNT', 'LIMIT_PART_COUNT', 'LIMIT_FIELD_COUNT']);

function isPayloadTooLarge(error: unknown): boolean {
	return (
		error instanceof BodyTooLarge ||
		(error instanceof MulterError && SIZE_LIMITS.has(error.code)) ||
		// Kit's own limit, which arrives through the stream.
		(error instanceof Error && 'status' in error && error.status === 413)
	);
}

function toProblem(error: unknown): { ok: false; problem: Problem } {
	if (isPayloadTooLarge(error)) return refuseTooLarge();
	if (error instanceof MulterError) {
		const field = error.field ?? 'body';
		const message =
			error.code === 'LIMIT_UNEXPECTED_FILE' ? 'No file is expected under this name.' : `${error.message}.`;
		return fail('invalid', `The part ${field} does not fit: ${message}`, { errors: [{ field, message }] });
	}
	const cause = error instanceof Error ? error.message : 'unreadable';
	return fail(
		'invalid',
		`The request is not whole, or not multipart/form-data as announced (${cause}). Send it again.`
	);
}

/** Runs multer over the request's body; resolves when every part is in the spool. */
function runMulter(request: Request, storage: SpoolStorage, options: ReceiveOptions): Promise<unknown> {
	const accepted = [...filesOf(options), ...(options.documents ?? [])].map((name) => ({
		name,
		maxCount: MOST_FILES
	}));
	const middleware = multer({
		storage,
		defParamCharset: 'utf8',
		limits: {
			fileSize: maxUploadBytes(),
			files: MOST_FILES,
			fields: MOST_FIELDS,
			fieldSize: MOST_FIELD_BYTES
		}
	}).fields(accepted);
	const body = request.body === null ? Readable.from([]) : Readable.from(readLimited(request.body));
	const incoming = Object.assign(body, {
		// Multer takes a request that announces neither length nor encoding for one without a body.
		headers: { 'transfer-encoding': 'chunked', ...Object.fromEntries(request.headers) }
	}) as unknown as MulterRequest;
	return new Promise((resolve, reject) => {
		body.on('error', reject);
		middleware(incoming, {} as MulterResponse, (error: unknown) => {
			if (error) reject(error instanceof Error ? error : new Error(String(error)));
			else resolve(incoming.body);
		});
	});
}

/** The fields that carry files. */
function filesOf({ field, more = [] }: ReceiveOptions): string[] {
	return [field, ...more];
}

/** The text fields of a request, each a list: names may repeat. */
function toTexts(body: unknown): Map<string, string[]> {
	const texts = new Map<string, string[]>();
	if (typeof body !== 'object' || body === null) return texts;
	for (const [name, value] of Object.entries(body)) {
		const list: unknown[] = Array.isArray(value) ? value : [value];
		texts.set(
			name,
			list.filter((item) => typeof item === 'string')
		);
	}
	return texts;
}

async function sortParts(
	storage: SpoolStorage,
	texts: Map<string, string[]>,
	options: ReceiveOptions
): Promise<Outcome<Received>> {
	for (const field of filesOf(options))
		for (const pasted of texts.get(field) ?? [])
			if (pasted.trim() !== '')
				await storage.add(Readable.from([Buffer.from(pasted)]), field, 'paste.txt', 'text/plain');
	const fields: Record<string, string> = {};
	for (const [name, values] of texts) {
		const last = values.at(-1);
		if (!filesOf(options).includes(name) && last !== undefined) fields[name] = last;
	}
	const uploads: Upload[] = [];
	const more: Record<string, Upload[]> = {};
	for (const { field, ...upload } of storage.list()) {
		if (field === options.field) uploads.push(upload);
		else if (options.more?.includes(field)) more[field] = [...(more[field] ?? []), upload];
		else if (upload.bytes > MOST_DOCUMENT_BYTES) return refuseTooLarge();
		else {
			fields[field] = await readFile(upload.path, 'utf8');
			await removeFromSpool([upload.path]);
		}
	}
	return ok({ uploads, more, fields });
}

/**
 * Receives the files and fields of a multipart request into the spool, never into memory. Refused by the
 * announced length before anything is read; a request that fails half-way leaves nothing behind. Whoever
 * calls it owns the files and removes them.
 */
export async function receiveUploads(
	event: { request: Request },
	options: ReceiveOptions
): Promise<Outcome<Received>> {
	const { request } = event;
	const type = request.headers.get('content-type') ?? '';
	if (!/^multipart\/form-data\s*(;|$)/i.test(type))
		return fail(
			'unsupported',
			`Send multipart/form-data with files under the name ${filesOf(options).join(' and ')}.`
		);
	const size = refuseOversized(request);
	if (!size.ok) return size;
	const storage = new SpoolStorage();
	try {
		const texts = toTexts(await runMulter(request, storage, options));
		const sorted = await sortParts(storage, texts, options);
		if (!sorted.ok) await storage.takeBack();
		return sorted;
	} catch (error) {
		await storage.takeBack();
		if (isStorageFault(error)) throw error;
		return toProblem(error);
	}
}
