import { open, rm, type FileHandle } from 'node:fs/promises';
import { processEvidence, type EvidenceRead } from '../../domain/reading/read-evidence';

/** What is read of a file in one go: large enough that a log of gigabytes isn't held up by turns. */
const CHUNK_BYTES = 256 * 1024;
/** Readable by the server's own account alone. */
const PRIVATE_FILE = 0o600;

/** One file to be masked and read. */
export interface FileToRead {
	rawPath: string;
	name: string;
	/** Where the masked bytes go; null: nowhere. */
	maskedPath: string | null;
}

/** Masks and reads a file in one pass. A masked file that could not be finished is removed. */
export async function readEvidenceFile({ rawPath, name, maskedPath }: FileToRead): Promise<EvidenceRead> {
	const raw = await open(rawPath, 'r');
	try {
		if (maskedPath === null) return await processEvidence(chunksOf(raw), name);
		return await readAndKeep(raw, name, maskedPath);
	} finally {
		await raw.close();
	}
}

async function readAndKeep(raw: FileHandle, name: string, maskedPath: string): Promise<EvidenceRead> {
	const target = await open(maskedPath, 'wx', PRIVATE_FILE);
	try {
		const read = await processEvidence(chunksOf(raw), name, (chunk) => writeAll(target, chunk));
		await target.sync();
		await target.close();
		return read;
	} catch (error) {
		await target.close();
		await rm(maskedPath, { force: true });
		throw error;
	}
}

async function* chunksOf(file: FileHandle): AsyncIterable<Uint8Array> {
	for (;;) {
		// A new one each time: whoever took the last may still hold it.
		const chunk = new Uint8Array(CHUNK_BYTES);
		const { bytesRead } = await file.read(chunk, 0, CHUNK_BYTES);
		if (bytesRead === 0) return;
		yield chunk.subarray(0, bytesRead);
	}
}

async function writeAll(target: FileHandle, chunk: Uint8Array): Promise<void> {
	for (let done = 0; done < chunk.length;) {
		done += (await target.write(chunk, done)).bytesWritten;
	}
}
