/** From how many operators on only the rows in sight are drawn. */
export const WINDOW_FROM = 300;
/** Height of a row in a windowed ledger, px; its texts are cut to one line. */
export const ROW_PX = 36;
/** Rows drawn above and below those in sight, so that a fast wheel meets no gap. */
const SPARE_ROWS = 15;

/** Which rows to draw: first and the one after the last. */
export function rowsInSight(
	total: number,
	scrolledPx: number,
	heightPx: number
): { first: number; end: number } {
	const first = Math.max(0, Math.floor(scrolledPx / ROW_PX) - SPARE_ROWS);
	const end = Math.min(total, Math.ceil((scrolledPx + heightPx) / ROW_PX) + SPARE_ROWS);
	return { first, end };
}
