import { createReadStream } from 'node:fs';
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
	const source = createReadStream(rawPath, { highWaterMark: CHUNK_BYTES });
	if (maskedPath === null) return processEvidence(source, name);
	const target = await open(maskedPath, 'wx', PRIVATE_FILE);
	try {
		const read = await processEvidence(source, name, (chunk) => writeAll(target, chunk));
		await target.sync();
		await target.close();
		return read;
	} catch (error) {
		await target.close();
		await rm(maskedPath, { force: true });
		throw error;
	}
}

async function writeAll(target: FileHandle, chunk: Uint8Array): Promise<void> {
	for (let done = 0; done < chunk.length;) {
		done += (await target.write(chunk, done)).bytesWritten;
	}
}
