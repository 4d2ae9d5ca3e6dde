import { THEME_COOKIE, toTheme } from '$lib/domain/person/theme';
import { requireActor } from '$lib/server/http/guard';
import type { LayoutServerLoad } from './$types';

/** A zone that this server knows; null: none yet, or nonsense. */
function readZone(name: string | undefined): string | null {
	if (name === undefined) return null;
	try {
		return new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone;
	} catch {
		// RangeError: the cookie holds no zone.
		return null;
	}
}

export const load = ((event) => {
	const actor = requireActor(event);
	return {
		actor,
		zone: readZone(event.cookies.get('catchwater_zone')),
		theme: toTheme(event.cookies.get(THEME_COOKIE)),
		now: new Date().toISOString()
	};
}) satisfies LayoutServerLoad;
