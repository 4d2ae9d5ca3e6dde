/** Minutes by which a zone's clock is ahead of UTC at an instant. */
function offsetMinutes(atMs: number, zone: string): number {
	const parts = new Intl.DateTimeFormat('en-GB', {
		timeZone: zone,
		hourCycle: 'h23',
		year: 'numeric',
		month: '2-digit',
		day: '2-digit',
		hour: '2-digit',
		minute: '2-digit'
	}).formatToParts(new Date(atMs));
	const of = (type: Intl.DateTimeFormatPartTypes) =>
		Number(parts.find((part) => part.type === type)?.value ?? 0);
	const local = Date.UTC(of('year'), of('month') - 1, of('day'), of('hour'), of('minute'));
	return Math.round((local - Math.floor(atMs / 60_000) * 60_000) / 60_000);
}

/** Whether the name is an IANA zone that this engine knows. */
export function isZone(zone: string): boolean {
	try {
		new Intl.DateTimeFormat('en', { timeZone: zone });
		return true;
	} catch {
		// RangeError: no such zone.
		return false;
	}
}

/**
 * A date and time as a form's field holds it ("2026-12-01T01:05"), read in a zone, as ISO 8601 in UTC; null: it is
 * no date and time. In the hour that a clock repeats, the earlier one is meant; in the hour that it leaves out, the
 * one after.
 */
export function readLocalTime(text: string, zone: string): string | null {
	const match = /^(\d{4})-(\d\d)-(\d\d)T(\d\d):(\d\d)(?::\d\d(?:\.\d+)?)?$/.exec(text.trim());
	if (match === null) return null;
	const [year = 0, month = 0, day = 0, hour = 0, minute = 0] = match.slice(1).map(Number);
	const asUtc = Date.UTC(year, month - 1, day, hour, minute);
	const back = new Date(asUtc);
	if (back.getUTCMonth() !== month - 1 || back.getUTCDate() !== day || hour > 23 || minute > 59) return null;
	const offsets = [offsetMinutes(asUtc - 86_400_000, zone), offsetMinutes(asUtc + 86_400_000, zone)];
	const fitting = offsets
		.map((offset) => asUtc - offset * 60_000)
		.filter((at) => asUtc - offsetMinutes(at, zone) * 60_000 === at);
	const at = fitting.length > 0 ? Math.min(...fitting) : asUtc - Math.min(...offsets) * 60_000;
	return new Date(at).toISOString();
}

/** An instant as a form's field takes it, in a zone: "2026-12-01T01:05". */
export function writeLocalTime(iso: string, zone: string): string {
	const atMs = Date.parse(iso);
	return new Date(atMs + offsetMinutes(atMs, zone) * 60_000).toISOString().slice(0, 16);
}
