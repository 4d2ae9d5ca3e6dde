import { formatBytes, formatKb, formatMs, formatRows } from '$lib/domain/sizing/units';

/** How far off an estimate was: 750.5 → "× 751", 0.01 → "÷ 100", about one → "as expected". */
export function formatRatio(ratio: number): string {
	if (ratio >= 0.95 && ratio < 1.05) return 'as expected';
	const times = ratio >= 1 ? ratio : 1 / ratio;
	const text = times < 10 ? String(Math.round(times * 10) / 10) : formatRows(Math.round(times));
	return `${ratio >= 1 ? '×' : '÷'} ${text}`;
}

/** A share as per cent: 0.86 → "86 %". */
export function formatShare(share: number): string {
	return `${Math.round(share * 100)} %`;
}

/** A setting's value rounded up to what one types, never below the need: 35328 → "35 MB", 900 → "900 kB". */
export function formatSetting(kb: number): string {
	return kb < 1024 ? `${Math.ceil(kb)} kB` : `${formatRows(Math.ceil(kb / 1024))} MB`;
}

/** A figure of a symptom by the unit in its name ("peakKb", "temporaryBytes", "totalMs", "share"). */
export function formatFigure(name: string, value: number | string): string {
	if (typeof value === 'string') return value;
	if (/kb$/i.test(name)) return formatKb(value);
	if (/bytes$/i.test(name)) return formatBytes(value);
	if (/ms$/i.test(name)) return formatMs(value);
	if (/seconds$/i.test(name)) return formatMs(value * 1000);
	if (/share$/i.test(name)) return formatShare(value);
	return formatRows(value);
}

/** Figures whose names the trade knows and a reader need not. */
const NAMED = new Map([
	['q', 'times off'],
	['predicates', 'conditions']
]);

/** A figure's name in words, its unit left to the value: "plannedBatches" → "planned batches". */
export function nameFigure(name: string): string {
	const known = NAMED.get(name);
	if (known !== undefined) return known;
	return name
		.replace(/(Kb|Bytes|Ms|Seconds)$/, '')
		.replace(/([a-z])([A-Z])/g, '$1 $2')
		.replaceAll('-', ' ')
		.toLowerCase();
}
