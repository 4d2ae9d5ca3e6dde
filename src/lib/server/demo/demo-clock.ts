import type { DemoIncident } from './demo-content';

/** Turns minutes after an incident's start into times. */
export interface DemoClock {
	/** RFC 3339 in UTC. */
	at(minutes: number): string;
	startedAt: string;
}

const MINUTE_MS = 60_000;

/** The clock of an incident: by its own date, or counted back from the moment of filling. */
export function clockOf(
	incident: Pick<DemoIncident, 'startedAt' | 'startedMinutesAgo'>,
	now: Date
): DemoClock {
	const startMs =
		incident.startedAt === undefined
			? now.getTime() - (incident.startedMinutesAgo ?? 0) * MINUTE_MS
			: Date.parse(incident.startedAt);
	const at = (minutes: number) => new Date(startMs + minutes * MINUTE_MS).toISOString();
	return { at, startedAt: at(0) };
}

const STAMP = /\b(\d{4}-\d{2}-\d{2}) (\d{2}:\d{2}:\d{2})\b/g;

/** Moves every time stamp of a log by what lies between two starts. */
export function moveStamps(text: string, fromStart: string, toStart: string): string {
	const shiftMs = Date.parse(toStart) - Date.parse(fromStart);
	return text.replace(STAMP, (stamp: string, day: string, time: string) => {
		const moved = new Date(Date.parse(`${day}T${time}Z`) + shiftMs);
		return Number.isNaN(moved.getTime()) ? stamp : moved.toISOString().slice(0, 19).replace('T', ' ');
	});
}
