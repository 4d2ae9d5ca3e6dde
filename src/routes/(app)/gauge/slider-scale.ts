/** Steps of a slider from one end to the other. */
export const SLIDER_STEPS = 200;

/** What a slider runs over; both ends above 0, because the scale is logarithmic. */
export interface SliderRange {
	least: number;
	most: number;
}

/** Where a value lies on the slider, 0..SLIDER_STEPS; values beyond an end lie at that end. */
export function toPosition(value: number, { least, most }: SliderRange): number {
	if (!(value > least)) return 0;
	const share = Math.log(value / least) / Math.log(most / least);
	return Math.min(SLIDER_STEPS, Math.round(share * SLIDER_STEPS));
}

/** The value at a position: whole and rounded to two significant digits, the ends exactly. */
export function toValue(position: number, { least, most }: SliderRange): number {
	if (position <= 0) return least;
	if (position >= SLIDER_STEPS) return most;
	const exact = least * (most / least) ** (position / SLIDER_STEPS);
	return Math.max(1, Math.round(Number(exact.toPrecision(2))));
}
