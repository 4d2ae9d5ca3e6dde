/** How much of a moment is written. */
export type TimeForm = 'clock' | 'day' | 'moment' | 'short';

const cache = new Map<string, Intl.DateTimeFormat>();

function formatter(zone: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
	const key = zone + JSON.stringify(options);
	let made = cache.get(key);
	if (made === undefined) {
		made = new Intl.DateTimeFormat('en-GB', { timeZone: zone, ...options });
		cache.set(key, made);
	}
	return made;
}

const clock = { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' } as const;
const day = { day: 'numeric', month: 'short', year: 'numeric' } as const;

/** The calendar day of a moment in a zone, "2026-12-01". */
export function dayOf(iso: string, zone: string): string {
	return formatter(zone, { year: 'numeric', month: '2-digit', day: '2-digit' })
		.format(new Date(iso))
		.split('/')
		.reverse()
		.join('-');
}

/**
 * A moment in a zone: clock "01:05", day "1 Dec 2026", moment "1 Dec 2026, 01:05", short "01:05" today and
 * "1 Dec, 01:05" before (with the year where it is another one).
 */
export function writeTime(iso: string, zone: string, form: TimeForm, now: string): string {
	const at = new Date(iso);
	if (form === 'clock') return formatter(zone, clock).format(at);
	if (form === 'day') return formatter(zone, day).format(at);
	const today = dayOf(iso, zone) === dayOf(now, zone);
	if (form === 'short' && today) return formatter(zone, clock).format(at);
	const sameYear = dayOf(iso, zone).slice(0, 4) === dayOf(now, zone).slice(0, 4);
	const dayText =
		form === 'short' && sameYear
			? formatter(zone, { day: 'numeric', month: 'short' }).format(at)
			: formatter(zone, day).format(at);
	return `${dayText}, ${formatter(zone, clock).format(at)}`;
}

/** The moment to the second in UTC, for the hover: "2026-12-01 01:05:09 UTC". */
export function writeUtc(iso: string): string {
	return `${new Date(iso).toISOString().slice(0, 19).replace('T', ' ')} UTC`;
}

const MINUTE_MS = 60_000;
const HOUR_MS = 60 * MINUTE_MS;
const DAY_MS = 24 * HOUR_MS;

/** A span in its two largest units: "38 min", "1 h 12 min", "3 d 4 h", "41 days". Negative spans count as none. */
export function writeSpan(fromIso: string, toIso: string): string {
	const ms = Math.max(0, Date.parse(toIso) - Date.parse(fromIso));
	if (ms < MINUTE_MS) return 'under a minute';
	if (ms < HOUR_MS) return `${Math.floor(ms / MINUTE_MS)} min`;
	if (ms < DAY_MS) {
		const minutes = Math.floor((ms % HOUR_MS) / MINUTE_MS);
		return `${Math.floor(ms / HOUR_MS)} h${minutes > 0 ? ` ${String(minutes).padStart(2, '0')} min` : ''}`;
	}
	const days = Math.floor(ms / DAY_MS);
	if (days >= 7) return `${days} days`;
	const hours = Math.floor((ms % DAY_MS) / HOUR_MS);
	return `${days} d${hours > 0 ? ` ${hours} h` : ''}`;
}

/** A span in its largest unit alone, for how long ago: "38 min", "23 h", "2 days". */
function writeRoughSpan(ms: number): string {
	if (ms < HOUR_MS) return `${Math.floor(ms / MINUTE_MS)} min`;
	if (ms < DAY_MS) return `${Math.floor(ms / HOUR_MS)} h`;
	const days = Math.floor(ms / DAY_MS);
	return days === 1 ? '1 day' : `${days} days`;
}

/** How long ago, in words: "just now", "12 min ago", "41 days ago"; a moment to come: "in 3 days". */
export function writeAgo(iso: string, now: string): string {
	const ms = Date.parse(now) - Date.parse(iso);
	if (Math.abs(ms) < MINUTE_MS) return 'just now';
	const span = writeRoughSpan(Math.abs(ms));
	return ms > 0 ? `${span} ago` : `in ${span}`;
}
