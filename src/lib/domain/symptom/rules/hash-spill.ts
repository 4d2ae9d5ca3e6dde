import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { BLOCK_BYTES, formatBytes, formatKb, formatRows } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import type { PlanTree } from '../plan-tree';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighBytes } from '../weight';

export const MOST_BATCHES: Threshold = {
	name: 'batches that stay in memory',
	value: 1,
	unit: 'batch',
	why: 'From the second batch on, both sides of the join are written to files and read again (nodeHash.c).'
};

/** Whether a hash table was split into batches; false where the evidence does not say. */
export function hasSpilled(hash: PlanOperator): boolean {
	return (hash.facts.hash?.batches ?? 0) > MOST_BATCHES.value;
}

/** Bytes that the table and its join wrote: the Hash shows the build side's, the join above it the probing side's; null: not printed. */
export function hashTemporaryBytesOf(hash: PlanOperator, tree: PlanTree): number | null {
	const own = hash.facts.ownTempWrittenBlocks;
	const probing = tree.parentOf(hash)?.facts.ownTempWrittenBlocks ?? null;
	return own === null && probing === null ? null : ((own ?? 0) + (probing ?? 0)) * BLOCK_BYTES;
}

/** Hash joins whose table did not fit. */
export const hashSpill: SymptomRule = {
	ids: ['hash-spill'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.filter(hasSpilled).map((hash) => toSymptom(hash, tree));
	}
};

function toSymptom(hash: PlanOperator, tree: PlanTree): Symptom {
	const facts = hash.facts.hash;
	const batches = facts?.batches ?? 0;
	const planned = facts?.plannedBatches ?? null;
	const grown = planned !== null && batches > planned;
	const bytes = hashTemporaryBytesOf(hash, tree);
	const join = tree.parentOf(hash) ?? hash;
	const course = grown
		? `${countOf(planned, 'batch', 'batches')} planned, ${countOf(batches, 'batch', 'batches')} in the end`
		: `${countOf(batches, 'batch', 'batches')}, as planned`;
	const limit = hash.memoryLimitKb === null ? '' : ` within ${formatKb(hash.memoryLimitKb)}`;
	const written = bytes === null ? '' : `; ${formatBytes(bytes)} went to temporary files`;
	const rows = hash.actualRows === null ? '' : ` of ${formatRows(hash.actualRows)} rows`;
	return {
		id: 'hash-spill',
		operator: hash.path,
		weight: weighBytes(bytes),
		figures: toFigures({
			batches,
			plannedBatches: planned,
			course: grown ? 'grown' : 'planned',
			peakKb: facts?.peakKb ?? null,
			limitKb: hash.memoryLimitKb,
			temporaryBytes: bytes
		}),
		summary: `The hash table${rows} of the ${phraseOperator(join)} did not fit${limit}: ${course}${written}.`
	};
}
