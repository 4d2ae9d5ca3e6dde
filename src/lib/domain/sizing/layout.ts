/**
 * How one build of PostgreSQL lays out what its memory limits count. Sources: facts of nodeHash.c, tuplesort.c,
 * nodeAgg.c and the memory contexts (aset.c, generation.c, bump.c) of the versions named.
 */
export interface MemoryLayout {
	/** Major version that the layout holds for. */
	version: number;
	pointerBytes: 4 | 8;
	/** HJTUPLE_OVERHEAD: header of one tuple in a hash table. */
	hashTupleOverheadBytes: number;
	/** MAXALIGN(SizeofMinimalTupleHeader). */
	minimalTupleHeaderBytes: number;
	/** sizeof(SortTuple), one slot of the sort array. */
	sortSlotBytes: number;
	/** Header that a full sort pays for each tuple; null: power-of-two chunks as in boundedSort. */
	sortChunkHeaderBytes: number | null;
	/** Header of an AllocSet chunk (bounded sorts, hash aggregates); the chunk itself is a power of two. */
	allocSetHeaderBytes: number;
	/** sizeof(TupleHashEntryData), one bucket of a hash aggregate. */
	aggregateBucketBytes: number;
	/** sizeof(AggStatePerGroupData), one transition value of one group. */
	perGroupStateBytes: number;
	/** Hash aggregates keep tuple and states without chunk headers (bump allocator). */
	aggregateBump: boolean;
	/** 18 and newer trade batches for memory (the last loop of ExecChooseHashTableSize). */
	balancesBatches: boolean;
}

/** The layout assumed where the evidence names no version: the most memory-hungry of those in use, so that a size never falls short. */
export const ASSUMED_VERSION = 15;

/** Layout of a PostgreSQL build. `version` is the major version; null: ASSUMED_VERSION. 64-bit unless told. */
export function postgresLayout(version: number | null, pointerBytes: 4 | 8 = 8): MemoryLayout {
	const major = version ?? ASSUMED_VERSION;
	const wide = pointerBytes === 8;
	return {
		version: major,
		pointerBytes,
		hashTupleOverheadBytes: wide ? 16 : 8,
		minimalTupleHeaderBytes: 16,
		sortSlotBytes: wide ? 24 : 16,
		sortChunkHeaderBytes: sortChunkHeader(major, wide),
		allocSetHeaderBytes: major >= 16 ? 8 : wide ? 16 : 8,
		aggregateBucketBytes: major >= 18 ? (wide ? 16 : 12) : wide ? 24 : 16,
		perGroupStateBytes: wide ? 16 : 8,
		aggregateBump: major >= 17,
		balancesBatches: major >= 18
	};
}

/** 14 and older: AllocSet; 15: generation context, 24 bytes; 16: the short header; 17 and newer: bump, none. */
function sortChunkHeader(major: number, wide: boolean): number | null {
	if (major >= 17) return 0;
	if (major === 16) return 8;
	if (major === 15) return wide ? 24 : 16;
	return null;
}

/** Rounds up to the 8 bytes that the engine aligns everything to. */
export function maxAlign(bytes: number): number {
	return Math.ceil(bytes / 8) * 8;
}

/** The smallest power of two that is not below the value; at least 1. */
export function pow2Ceil(value: number): number {
	return value <= 1 ? 1 : 2 ** Math.ceil(Math.log2(value) - 1e-12);
}

/** The largest power of two that is not above the value; at least 1. */
export function pow2Floor(value: number): number {
	return value <= 1 ? 1 : 2 ** Math.floor(Math.log2(value) + 1e-12);
}

/** The chunk that an AllocSet takes for a request: a power of two up to 8 kB, exact (aligned) above, and its header. */
export function allocSetChunkBytes(layout: MemoryLayout, bytes: number): number {
	return layout.allocSetHeaderBytes + (bytes > 8192 ? maxAlign(bytes) : Math.max(8, pow2Ceil(bytes)));
}

/** Major version of "15.18", "18beta1", "PostgreSQL 16.2 on x86_64"; null where there is none. */
export function readMajorVersion(text: string | null): number | null {
	const match = text === null ? null : /(\d+)/.exec(text);
	return match === null ? null : Number(match[1]);
}

/** hash_mem_multiplier where nobody set it: 2.0 from 15 on (release notes 15), 1.0 before. Null version: as 15. */
export function defaultHashMemMultiplier(version: number | null): number {
	return (version ?? ASSUMED_VERSION) >= 15 ? 2 : 1;
}

/** work_mem where nobody set it (manual, "Resource Consumption"), kB. */
export const DEFAULT_WORK_MEM_KB = 4096;

/** The smallest work_mem that the server accepts, kB. */
export const LEAST_WORK_MEM_KB = 64;
