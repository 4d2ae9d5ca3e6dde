import { createHash, randomBytes } from 'node:crypto';

/** Twice the 128 bits that OWASP ASVS v5.0.0-7.2.3 asks of a session token. */
const SECRET_BYTES = 32;

/** A random secret for a link or a token: 256 bits as base64url. */
export function makeSecret(): string {
	return randomBytes(SECRET_BYTES).toString('base64url');
}

/** The hash under which a secret is kept. It is random and long, so a fast hash without salt is enough. */
export function hashSecret(secret: string): string {
	return createHash('sha256').update(secret).digest('hex');
}
