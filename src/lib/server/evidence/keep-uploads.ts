import { finishLater } from './late-reading';
import { hashesOf, settleFiles, type Kept } from './keep-evidence';
import { startReading, waitForQuick, type PendingUpload } from './read-upload';
import { removeFromSpool } from './spool';
import type { Upload } from './upload';

/** Throws away what is left of uploads in the spool; one that is still being read, when that has ended. */
async function release(uploads: readonly PendingUpload[]): Promise<void> {
	for (const { upload, reading, done } of uploads) {
		if (done !== null) await removeFromSpool([upload.path, done.maskedPath]);
		else
			void reading
				.then(
					(read) => removeFromSpool([read.maskedPath]),
					// Nothing was kept: the failure is told by the request that failed.
					() => undefined
				)
				.finally(() => removeFromSpool([upload.path]));
	}
}

/**
 * Masks and reads uploads, lets `store` write what belongs to them in its own transaction, and sees to
 * the files whatever comes of it: those stored stay, the spool is emptied, slow readings go on and are kept
 * when they end.
 */
export async function keepUploads<T>(
	uploads: readonly Upload[],
	store: (read: readonly PendingUpload[]) => Promise<{ value: T; kept: readonly Kept[] }>
): Promise<T> {
	const pending = startReading(uploads);
	try {
		await waitForQuick(pending);
		const { value, kept } = await store(pending);
		const late = kept.filter((one) => one.late);
		await release(pending.filter((one) => !late.some(({ pending }) => pending === one)));
		for (const { evidenceId, pending: one } of late) finishLater(evidenceId, one.reading, one.upload.path);
		return value;
	} catch (error) {
		await release(pending);
		throw error;
	} finally {
		await settleFiles(hashesOf(pending));
	}
}
