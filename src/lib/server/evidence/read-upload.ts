import { open } from 'node:fs/promises';
import { fileTypeFromBuffer } from 'file-type';
import type { EvidenceKind } from '$lib/domain/incident/incident';
import type { LogHints, Reading } from '$lib/domain/reading/reading';
import * as readingPool from '../readings/reading-pool';
import { makeSpoolPath } from './spool';
import type { Upload } from './upload';

/** What became of an upload: masked, and read. */
export interface ReadUpload {
	/** The masked bytes, still in the spool. */
	maskedPath: string;
	/** Of the masked bytes. */
	sha256: string;
	bytes: number;
	kind: EvidenceKind;
	format: string;
	readings: Reading[];
	hints: LogHints | null;
}

/** An upload on its way through masking and reading. */
export interface PendingUpload {
	upload: Upload;
	reading: Promise<ReadUpload>;
	/** What the reading came to; null while it is under way. */
	done: ReadUpload | null;
}

/** An answer waits so long for readings; what takes longer is answered as being read. */
const READ_WAIT_MS = 15_000;
/** More than any signature that file-type knows of needs. */
const HEAD_BYTES = 4100;

/** Whether the content, whatever the name says, is that of a picture. */
async function isPicture(path: string): Promise<boolean> {
	const handle = await open(path, 'r');
	try {
		const head = new Uint8Array(HEAD_BYTES);
		const { bytesRead } = await handle.read(head, 0, HEAD_BYTES, 0);
		const type = await fileTypeFromBuffer(head.subarray(0, bytesRead));
		return type !== undefined && type.mime.startsWith('image/');
	} finally {
		await handle.close();
	}
}

/** The kind of evidence that its readings make it. */
export function kindOf(readings: readonly Reading[], picture: boolean): EvidenceKind {
	if (picture) return 'picture';
	// A log may hold plans, so that its own reading decides before theirs.
	if (readings.some((reading) => reading.kind === 'log')) return 'log';
	return readings.some((reading) => reading.kind === 'plan') ? 'plan' : 'other';
}

/** Masks and reads one file; its kind is decided by its content. */
export async function readUpload(rawPath: string, name: string): Promise<ReadUpload> {
	const maskedPath = await makeSpoolPath('masked');
	const picture = await isPicture(rawPath);
	const { sha256, bytes, readings, hints } = await readingPool.readFile(rawPath, name, maskedPath);
	return {
		maskedPath,
		sha256,
		bytes,
		kind: kindOf(readings, picture),
		format: readings[0]?.format ?? 'unknown',
		readings,
		hints
	};
}

/** Starts masking and reading all of them. */
export function startReading(uploads: readonly Upload[]): PendingUpload[] {
	return uploads.map((upload) => {
		const pending: PendingUpload = { upload, reading: readUpload(upload.path, upload.name), done: null };
		// Whoever waits for `reading` is told of its failure; until then it is nobody's unhandled one.
		pending.reading.then(
			(read) => {
				pending.done = read;
			},
			() => undefined
		);
		return pending;
	});
}

/** Waits until all are read, though not longer than an answer may take. Rejects when one has failed. */
export async function waitForQuick(pending: readonly PendingUpload[]): Promise<void> {
	let timer: NodeJS.Timeout | undefined;
	const patience = new Promise<void>((resolve) => {
		timer = setTimeout(resolve, READ_WAIT_MS);
	});
	try {
		await Promise.race([Promise.all(pending.map(({ reading }) => reading)), patience]);
	} finally {
		clearTimeout(timer);
	}
}
