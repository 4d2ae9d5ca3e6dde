/** How much damage a symptom did, from 0 to 1, so that the worst comes first. One scale for each kind of figure. */

const BYTES_PER_MB = 1024 * 1024;

function clamp(weight: number): number {
	return Math.round(Math.min(0.99, Math.max(0.05, weight)) * 1000) / 1000;
}

/** Temporary bytes: 1 MB weighs 0.5, each factor of ten 0.13 more; 10 GB come close to 1. */
export function weighBytes(bytes: number | null): number {
	return clamp(0.46 + 0.13 * Math.log10(1 + (bytes ?? 0) / BYTES_PER_MB));
}

/** Being off by a factor: 10 times weighs 0.3, each factor of ten 0.15 more; many rows weigh a little more than few. */
export function weighFactor(factor: number, rows: number): number {
	return clamp(0.15 + 0.15 * Math.log10(Math.max(1, factor)) + 0.04 * Math.log10(Math.max(1, rows / 1000)));
}

/** A share of the whole time or of all blocks. */
export function weighShare(share: number): number {
	return clamp(0.15 + 0.7 * share);
}

/** Rows touched for nothing: 10,000 weigh 0.3, each factor of ten 0.12 more. */
export function weighRows(rows: number): number {
	return clamp(0.3 + 0.12 * Math.log10(Math.max(1, rows / 10_000)));
}
