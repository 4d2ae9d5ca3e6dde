/** Where a week's bytes stand on the picture: a logarithmic scale between two round figures. */
export interface SpillScale {
	/** Round figures in bytes, smallest first: the foot, those between, the top. */
	ticks: number[];
	/** 0 at the foot, 1 at the top; held inside. */
	at(bytes: number): number;
}

/** 1, 10 and 100 of each unit, in bytes: 1 kB … 100 TB. What people call round, though 1 GB is 1,024 MB. */
const ROUND = [1, 2, 3, 4].flatMap((power) => [1, 10, 100].map((factor) => factor * 1024 ** power));

/** The smallest scale of round figures that holds every figure, at least one step long. */
export function scaleFor(figures: readonly number[]): SpillScale {
	const held = figures.length > 0 ? figures : [1024 ** 2];
	const low = Math.min(...held);
	const high = Math.max(...held);
	const first = Math.max(
		0,
		ROUND.findLastIndex((tick) => tick < low)
	);
	const above = ROUND.findIndex((tick) => tick >= high);
	const last = Math.max(first + 1, above === -1 ? ROUND.length - 1 : above);
	const ticks = ROUND.slice(first, last + 1);
	const foot = ticks[0] ?? 1;
	const top = ticks.at(-1) ?? foot * 10;
	const at = (bytes: number) =>
		bytes <= foot ? 0 : Math.min(1, Math.log(bytes / foot) / Math.log(top / foot));
	return { ticks, at };
}
