/**
 * The one place where sizes, rows and times are read from settings and written for people.
 * kB is 1,024 bytes everywhere, as PostgreSQL counts it.
 */
export const BYTES_PER_KB = 1024;

/** One block of a data or temporary file (PostgreSQL's compile-time BLCKSZ, the default). */
export const BLOCK_BYTES = 8192;

/** PostgreSQL's units of memory settings; case counts there ("kB", not "KB"). Manual 15, section 20.1.1. */
const SETTING_UNITS_BYTES: Record<string, number> = {
	B: 1,
	kB: 1024,
	MB: 1024 ** 2,
	GB: 1024 ** 3,
	TB: 1024 ** 4
};

/** kB of a PostgreSQL memory setting ("4MB", "64 kB", "4096" = kB); null where the text is no memory size. */
export function readMemoryKb(setting: string): number | null {
	const match = /^\s*'?(\d+(?:\.\d+)?)\s*(B|kB|MB|GB|TB)?'?\s*$/.exec(setting);
	if (match === null) return null;
	const unitBytes = SETTING_UNITS_BYTES[match[2] ?? 'kB'] ?? BYTES_PER_KB;
	return (Number(match[1]) * unitBytes) / BYTES_PER_KB;
}

/** A PostgreSQL memory setting in the largest unit that holds it exactly: 15360 → "15MB", 14436 → "14436kB". */
export function toMemorySetting(kb: number): string {
	const whole = Math.ceil(kb);
	if (whole > 0 && whole % 1024 ** 2 === 0) return `${whole / 1024 ** 2}GB`;
	if (whole > 0 && whole % 1024 === 0) return `${whole / 1024}MB`;
	return `${whole}kB`;
}

const SIZE_UNITS = ['bytes', 'kB', 'MB', 'GB', 'TB', 'PB'] as const;

/** Bytes for people: "512 bytes", "8 kB", "55.1 MB", "1.07 GB": three figures at most below 1,000. */
export function formatBytes(bytes: number): string {
	let value = bytes;
	let unit = 0;
	while (Math.abs(value) >= 1024 && unit < SIZE_UNITS.length - 1) {
		value /= 1024;
		unit++;
	}
	return `${unit === 0 ? groupDigits(Math.round(value)) : toThreeFigures(value)} ${SIZE_UNITS[unit] ?? ''}`;
}

/** Kilobytes for people; see formatBytes. */
export function formatKb(kb: number): string {
	return formatBytes(kb * BYTES_PER_KB);
}

/** Rows (or any count) for people: "450,300"; fractions of rows per loop keep two places: "0.33". */
export function formatRows(rows: number): string {
	if (Number.isInteger(rows) || Math.abs(rows) >= 10) return groupDigits(Math.round(rows));
	return trimZeros(rows.toFixed(2));
}

/** Milliseconds for people: "0.42 ms", "666 ms", "12.4 s", "3 min 20 s". */
export function formatMs(ms: number): string {
	if (ms < 1000) return `${ms < 100 ? trimZeros(ms.toPrecision(2)) : Math.round(ms)} ms`;
	const seconds = ms / 1000;
	if (seconds < 60) return `${toThreeFigures(seconds)} s`;
	const whole = Math.round(seconds);
	return `${groupDigits(Math.floor(whole / 60))} min ${whole % 60} s`;
}

/** A ratio for people: "562.9 times", whole from 1,000 on. */
export function formatTimes(ratio: number): string {
	return `${ratio >= 100 ? groupDigits(Math.round(ratio)) : trimZeros(ratio.toFixed(1))} times`;
}

function groupDigits(whole: number): string {
	return String(whole).replace(/\B(?=(\d{3})+(?!\d))/g, ',');
}

function toThreeFigures(value: number): string {
	return Math.abs(value) >= 100 ? groupDigits(Math.round(value)) : trimZeros(value.toPrecision(3));
}

function trimZeros(text: string): string {
	return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}
