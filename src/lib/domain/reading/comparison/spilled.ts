import type { SymptomId } from '../../symptom/symptom';
import { walkOperators, type Operator } from '../operator';
import type { Reading } from '../reading';

/** What an operator left in temporary files, by the symptoms of its reading. */
export interface Spilled {
	/** null: not in the evidence. */
	bytes: number | null;
	/** null: the operator knows no batches. */
	batches: number | null;
}

export const SPILLS: readonly SymptomId[] = [
	'hash-spill',
	'sort-spill',
	'aggregate-spill',
	'materialize-spill',
	'temp-table-on-disk'
];

/** The operators of a reading that overflowed, by path. A hash table's overflow is its join's. */
export function listSpilled(reading: Reading): Map<string, Spilled> {
	const spilled = new Map<string, Spilled>();
	if (reading.plan === null) return spilled;
	const kinds = new Map<string, Operator['kind']>();
	for (const { path, kind } of walkOperators(reading.plan.root)) kinds.set(path, kind);
	for (const { id, operator, figures } of reading.symptoms) {
		if (operator === null || !SPILLS.includes(id)) continue;
		const path = kinds.get(operator) === 'hash-build' ? operator.replace(/\.\d+$/, '') : operator;
		const known = spilled.get(path);
		spilled.set(path, {
			bytes: sum(known?.bytes ?? null, bytesOf(figures)),
			batches: toNumber(figures.batches) ?? known?.batches ?? null
		});
	}
	return spilled;
}

function bytesOf(figures: Reading['symptoms'][number]['figures']): number | null {
	const kb = toNumber(figures.diskKb);
	return toNumber(figures.temporaryBytes) ?? toNumber(figures.bytes) ?? (kb === null ? null : kb * 1024);
}

function toNumber(figure: number | string | undefined): number | null {
	return typeof figure === 'number' ? figure : null;
}

function sum(one: number | null, other: number | null): number | null {
	return one === null ? other : one + (other ?? 0);
}
