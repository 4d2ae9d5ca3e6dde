import type { WatchedIncident } from './watch';

type Ordered = Pick<WatchedIncident, 'owner' | 'severity' | 'since' | 'number'>;

/** Orders what is open: without an owner first, then by severity, then the oldest, then by number. */
export function orderIncidents<T extends Ordered>(incidents: readonly T[]): T[] {
	return [...incidents].sort(
		(a, b) =>
			Number(a.owner !== null) - Number(b.owner !== null) ||
			a.severity - b.severity ||
			a.since.localeCompare(b.since) ||
			a.number - b.number
	);
}
