import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { Config } from './config';

const FILE = 'secret.key';
const KEY_BYTES = 32;

function isNamed(error: unknown, code: string): boolean {
	return error instanceof Error && 'code' in error && error.code === code;
}

/**
 * The installation's key: SECRET_KEY where it is set, else the key file of the data folder, which is made
 * on first start and readable by its owner alone.
 */
export function readSecretKey(settings: Pick<Config, 'dataDir' | 'secretKey'>): string {
	if (settings.secretKey !== null) return settings.secretKey;
	const file = path.join(settings.dataDir, FILE);
	mkdirSync(settings.dataDir, { recursive: true, mode: 0o700 });
	try {
		// 'wx' fails where the file exists: two processes starting at once agree on one key.
		writeFileSync(file, `${randomBytes(KEY_BYTES).toString('base64url')}\n`, { mode: 0o600, flag: 'wx' });
	} catch (error) {
		if (!isNamed(error, 'EEXIST')) throw error;
	}
	return readFileSync(file, 'utf8').trim();
}
