import { createSHA256, type IHasher } from 'hash-wasm';

let prepared: IHasher | null = null;

/** Loads the hash once; `fingerprintStatement` needs it. */
export async function prepareFingerprints(): Promise<void> {
	prepared ??= await createSHA256();
}

/**
 * 16 hex digits that are equal for the same masked statement, whatever its case and layout: the first half of the
 * first half of the SHA-256 of the statement in lower case without whitespace and without a closing semicolon.
 */
export function fingerprintStatement(maskedSql: string): string {
	if (prepared === null)
		throw new Error('prepareFingerprints() was not awaited before fingerprintStatement().');
	const key = maskedSql
		.toLowerCase()
		.replace(/[\s\u00a0\ufeff]+/g, '')
		.replace(/;+$/, '');
	return prepared.init().update(key).digest('hex').slice(0, 16);
}
