import type { WeekOfSpills } from './watch';

const DAY_MS = 24 * 60 * 60 * 1000;
const WEEK_MS = 7 * DAY_MS;

/** What one log said, and when it happened. */
export interface SpillOfLog {
	at: string;
	temporaryBytes: number;
}

/** The Monday, 00:00 UTC, of the week that holds the instant; ms since 1970. */
export function startOfWeek(at: Date): number {
	const midnight = Date.UTC(at.getUTCFullYear(), at.getUTCMonth(), at.getUTCDate());
	const daysSinceMonday = (at.getUTCDay() + 6) % 7;
	return midnight - daysSinceMonday * DAY_MS;
}

/** When the first of the last `weeks` weeks begins, the current one included; RFC 3339. */
export function startOfWeeks(now: Date, weeks: number): string {
	return new Date(startOfWeek(now) - (weeks - 1) * WEEK_MS).toISOString();
}

/** Sums the logs by week, oldest first. A week without a log is null, not 0; logs outside are left out. */
export function sumSpillWeeks(logs: readonly SpillOfLog[], now: Date, weeks: number): WeekOfSpills[] {
	const first = startOfWeek(now) - (weeks - 1) * WEEK_MS;
	const sums: WeekOfSpills[] = Array.from({ length: weeks }, (_, week) => ({
		from: new Date(first + week * WEEK_MS).toISOString().slice(0, 10),
		temporaryBytes: null,
		logs: 0
	}));
	for (const log of logs) {
		const sum = sums[Math.floor((Date.parse(log.at) - first) / WEEK_MS)];
		if (sum === undefined) continue;
		sum.temporaryBytes = (sum.temporaryBytes ?? 0) + log.temporaryBytes;
		sum.logs += 1;
	}
	return sums;
}
