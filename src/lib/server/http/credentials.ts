export const SESSION_COOKIE = 'catchwater_session';

/** The token of `Authorization: Bearer …` (the scheme in any case, RFC 9110 section 11.1); null without one. */
export function readBearer(request: Request): string | null {
	const match = /^Bearer(?: +(.*))?$/i.exec(request.headers.get('authorization')?.trim() ?? '');
	return match ? (match[1] ?? '').trim() : null;
}
