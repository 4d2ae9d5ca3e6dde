import { ENGINE_NAMES } from '$lib/domain/reading/engine-names';

const NAMES = new Map<string, string | null>(Object.entries(ENGINE_NAMES));

/** An engine as people write it, with its version: "PostgreSQL 15.18"; null: it isn't known. */
export function nameEngine(engine: string | null, version: string | null = null): string | null {
	const name = (engine === null ? null : NAMES.get(engine)) ?? null;
	if (name === null) return null;
	return version === null || version === '' ? name : `${name} ${version}`;
}
