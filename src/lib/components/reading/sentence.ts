import type { Operator } from '$lib/domain/reading/operator';
import { phraseOperator } from '$lib/domain/reading/operator-phrase';
import type { Reading } from '$lib/domain/reading/reading';
import { formatBytes, formatRows } from '$lib/domain/sizing/units';

/** The one sentence that a reading answers with, before any figure: its trail, its heaviest symptom, or that all is well. */
export function sayWhatOverflows(reading: Reading): string {
	const trail = reading.trails[0];
	if (trail !== undefined) {
		// The misestimate may lie elsewhere than the overflow: then both are said, the harm first.
		const spill = reading.symptoms.find(({ id }) => id.endsWith('-spill'));
		return trail.overflow === null && spill !== undefined
			? `${spill.summary} ${trail.sentence}`
			: trail.sentence;
	}
	const heaviest = reading.symptoms[0];
	if (heaviest !== undefined) return heaviest.summary;
	if (reading.spills !== null && reading.spills.files > 0)
		return `${formatRows(reading.spills.files)} temporary ${reading.spills.files === 1 ? 'file' : 'files'}, ${formatBytes(reading.spills.bytes)} in all.`;
	if (reading.kind === 'unknown') return 'This is neither a plan nor a log that can be read.';
	return reading.kind === 'plan'
		? 'Nothing overflows and no estimate is far off.'
		: 'No temporary file in this log.';
}

/** The operators that the sentence should set off: where the trail begins and wherever it overflows. */
export function wordsToMark(reading: Reading, operators: ReadonlyMap<string, Operator>): string[] {
	const trail = reading.trails[0];
	if (trail === undefined) return [];
	const first = trail.steps[0]?.operator;
	const last = trail.overflow ?? trail.steps.at(-1)?.operator;
	const operatorsOfTrail = trail.steps.flatMap(({ operator }) => operators.get(operator) ?? []);
	return operatorsOfTrail
		.filter(({ path, temporaryBytes }) => path === first || path === last || (temporaryBytes ?? 0) > 0)
		.map(phraseOperator);
}

/** The heading over the sentence: a plan can be far off without overflowing. */
export function headOverflow(reading: Reading): string {
	const { trails, spills, symptoms } = reading;
	const overflows =
		trails.some(({ overflow }) => overflow !== null) ||
		(spills !== null && spills.files > 0) ||
		symptoms.some(({ id }) => id.endsWith('-spill') || id === 'temp-table-on-disk');
	if (overflows || trails.length === 0) return 'Where it overflows';
	return 'Where the estimate goes wrong';
}
