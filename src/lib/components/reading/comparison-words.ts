import { HARM } from '$lib/domain/reading/comparison/say-worse';
import { formatBytes, formatMs } from '$lib/domain/sizing/units';

/** A sentence of a summary; `harm`: it tells of what still goes wrong, or does so now. */
export interface SummaryPart {
	text: string;
	harm: boolean;
}

/** The sentences of a comparison's summary, those that tell of harm set off. */
export function markSummary(summary: string): SummaryPart[] {
	// A full stop inside a figure or a name is followed by no space.
	return summary.split(/(?<=\.) (?=\S)/).map((text) => ({ text, harm: HARM.test(text) }));
}

/** A figure of both plans for people: "646 ms"; what is not in the evidence is said to be so. */
export function sayFigure(value: number | null, kind: 'time' | 'bytes'): string {
	if (value === null) return 'not known';
	if (kind === 'time') return formatMs(value);
	return value === 0 ? 'none' : formatBytes(value);
}
