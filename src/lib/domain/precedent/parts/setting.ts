import type { PrecedentProfile } from '../precedent';
import { DATABASE_COUNTS, ENGINE_COUNTS, SERVICE_COUNTS } from '../weights';

type Setting = Pick<PrecedentProfile, 'service' | 'engine' | 'database'>;

/**
 * Whether two incidents happened in the same place, 0..1: same service, same engine, same database, over what
 * is known of the one asked about. Null: nothing is.
 */
export function compareSettings(asked: Setting, other: Setting): number | null {
	const engine = asked.engine === 'unknown' ? null : asked.engine;
	const respects = [
		{ asked: asked.service, other: other.service, counts: SERVICE_COUNTS },
		{ asked: engine, other: other.engine, counts: ENGINE_COUNTS },
		{ asked: asked.database, other: other.database, counts: DATABASE_COUNTS }
	].filter((respect) => respect.asked !== null && respect.asked !== '');
	const all = respects.reduce((sum, respect) => sum + respect.counts, 0);
	if (all === 0) return null;
	const same = respects.filter((respect) => respect.asked?.toLowerCase() === respect.other?.toLowerCase());
	return same.reduce((sum, respect) => sum + respect.counts, 0) / all;
}
