/** One tick of a staff gauge. */
export interface Tick {
	value: number;
	/** 1 × 10^n carries a label, 5 × 10^n is longer than 2 × 10^n. */
	step: 1 | 2 | 5;
}

/** A ruler on a logarithmic scale between two powers of ten. */
export interface LogScale {
	from: number;
	to: number;
	ticks: Tick[];
	/** Where a value stands: 0 at `from`, 1 at `to`; held inside the ruler. */
	at(value: number): number;
}

const STEPS = [1, 2, 5] as const;

/**
 * The smallest ruler from a power of ten below every value to one above it, at least one decade long.
 * `unit`: what one is (1024 for a ruler in MB over figures in kB). Values of zero or less stand at the foot.
 */
export function rulerFor(values: readonly number[], unit = 1): LogScale {
	const positive = values.filter((value) => value > 0 && Number.isFinite(value)).map((value) => value / unit);
	const low = positive.length > 0 ? Math.min(...positive) : 1;
	const high = positive.length > 0 ? Math.max(...positive) : 10;
	const first = Math.floor(Math.log10(low) + 1e-9);
	const last = Math.max(first + 1, Math.ceil(Math.log10(high) - 1e-9));
	return ruler(first, last, unit);
}

/** A ruler from 10^first to 10^last, times `unit`. */
export function ruler(first: number, last: number, unit = 1): LogScale {
	const ticks: Tick[] = [];
	for (let power = first; power <= last; power++)
		for (const step of STEPS)
			if (power < last || step === 1) ticks.push({ value: step * 10 ** power * unit, step });
	const from = 10 ** first * unit;
	const to = 10 ** last * unit;
	const at = (value: number) =>
		value <= from ? 0 : Math.min(1, Math.log10(value / from) / Math.log10(to / from));
	return { from, to, ticks, at };
}
