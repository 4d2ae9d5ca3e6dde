import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { chooseHashTable } from '../../sizing/hash';
import { postgresLayout, type MemoryLayout } from '../../sizing/layout';
import { formatKb } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import { guessMajorVersion } from '../guess-version';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighFactor } from '../weight';
import { hasSpilled } from './hash-spill';

export const LEAST_OVERRUN: Threshold = {
	name: 'peak above the limit',
	value: 1.5,
	unit: 'times',
	why: 'A table that can be split stays within its limit; one that is half as large again holds rows of equal keys, which no batch can part.'
};
export const LEAST_DOUBLING: Threshold = {
	name: 'batches against those planned, peak still above the limit',
	value: 16,
	unit: 'times',
	why: 'Four doublings that did not bring the table below its limit moved next to nothing.'
};

/** Hash tables that stayed too large however often they were split: a few keys hold most rows. */
export const skewedHash: SymptomRule = {
	ids: ['skewed-hash'],
	find({ plan, tree }: RuleInput): Symptom[] {
		// Once a plan: telling the version looks at every operator.
		const layout = postgresLayout(guessMajorVersion(plan));
		return tree.operators.flatMap((hash) => {
			const limitKb = limitOf(hash, layout);
			const peakKb = hash.facts.hash?.peakKb ?? null;
			// A shared table's chunks are counted for all processes together: its peak says nothing of skew.
			if (limitKb === null || peakKb === null || hash.facts.parallelAware || !hasSpilled(hash)) return [];
			const batches = hash.facts.hash?.batches ?? 1;
			const doubling = batches / (hash.facts.hash?.plannedBatches ?? batches);
			const overrun = peakKb / limitKb;
			if (overrun <= LEAST_OVERRUN.value && !(doubling >= LEAST_DOUBLING.value && overrun > 1)) return [];
			const join = tree.parentOf(hash) ?? hash;
			return [
				{
					id: 'skewed-hash' as const,
					operator: hash.path,
					weight: weighFactor(overrun * doubling, hash.actualRows ?? 0),
					figures: toFigures({
						peakKb,
						limitKb,
						batches,
						plannedBatches: hash.facts.hash?.plannedBatches ?? null
					}),
					summary: `The hash table of the ${phraseOperator(join)} holds ${formatKb(peakKb)} where ${formatKb(limitKb)} are allowed, and ${countOf(batches, 'batch', 'batches')} did not make it smaller: a few keys hold most of its rows.`
				}
			];
		});
	}
};

/** hash_mem; from 18 on the larger table that the engine chooses on purpose to save batches. */
function limitOf(hash: PlanOperator, layout: MemoryLayout): number | null {
	if (hash.memoryLimitKb === null) return null;
	if (!layout.balancesBatches) return hash.memoryLimitKb;
	const { spaceBytes } = chooseHashTable(layout, {
		rows: hash.facts.plannedRowsPerLoop ?? 0,
		widthBytes: hash.width ?? 0,
		workMemKb: hash.memoryLimitKb,
		hashMemMultiplier: 1,
		participants: 1,
		skewPossible: true
	});
	return Math.max(hash.memoryLimitKb, spaceBytes / 1024);
}
