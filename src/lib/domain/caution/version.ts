/** The major version of "15.18", "PostgreSQL 15.18" or "15"; null where none is given. */
export function versionOf(engineVersion: string | null): number | null {
	const digits = /\d+/.exec(engineVersion ?? '')?.[0];
	return digits === undefined ? null : Number(digits);
}
