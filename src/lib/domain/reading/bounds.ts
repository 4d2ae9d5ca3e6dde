/** Limits on what is read, so that no evidence can stop a server or a browser. */
export const BOUNDS = {
	/** A plan larger than this is kept but not read. Real plans stay far below 10 MB. */
	planBytes: 64 * 1024 * 1024,
	/** Operators below this depth are left out. Real plans stay below 100. */
	nesting: 500,
	/** Operators beyond this count are left out. Plans over thousands of partitions reach about 10,000. */
	operators: 20_000,
	/** What is looked at to recognise a format. */
	headBytes: 64 * 1024
} as const;
