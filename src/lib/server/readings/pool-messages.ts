import type { EvidenceRead } from '../../domain/reading/read-evidence';
import type { FileToRead } from './read-file';

/** A file for a worker of the reading pool. */
export interface PoolAsk {
	id: number;
	file: FileToRead;
}

/** What came of it; a failure is the disk's, never the content's. */
export type PoolAnswer =
	{ id: number; read: EvidenceRead } | { id: number; failed: { message: string; code: string | null } };
