import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { formatKb, formatRows } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighBytes } from '../weight';

export const MOST_AGGREGATE_BATCHES: Threshold = {
	name: 'batches that stay in memory',
	value: 1,
	unit: 'batch',
	why: 'Further batches hold input rows of groups that found no room and went to files (nodeAgg.c, 13 and newer).'
};

/** Whether a hash aggregate wrote rows to files in any process. */
export function hasAggregateSpilled(operator: PlanOperator): boolean {
	return operator.facts.aggregates.some(
		(each) => (each.batches ?? 0) > MOST_AGGREGATE_BATCHES.value || (each.diskKb ?? 0) > 0
	);
}

/** Hash aggregates whose groups did not fit. */
export const aggregateSpill: SymptomRule = {
	ids: ['aggregate-spill'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators.filter(hasAggregateSpilled).map(toSymptom);
	}
};

function toSymptom(operator: PlanOperator): Symptom {
	const parts = operator.facts.aggregates;
	const batches = Math.max(...parts.map((each) => each.batches ?? 0));
	const diskKb = parts.reduce((sum, each) => sum + (each.diskKb ?? 0), 0);
	const planned = parts[0]?.plannedPartitions ?? null;
	const groups = operator.actualRows === null ? '' : ` of ${formatRows(operator.actualRows)} groups`;
	const limit = operator.memoryLimitKb === null ? '' : ` within ${formatKb(operator.memoryLimitKb)}`;
	return {
		id: 'aggregate-spill',
		operator: operator.path,
		weight: weighBytes(operator.temporaryBytes ?? diskKb * 1024),
		figures: toFigures({
			batches,
			diskKb,
			plannedPartitions: planned,
			limitKb: operator.memoryLimitKb,
			temporaryBytes: operator.temporaryBytes
		}),
		summary: `The ${phraseOperator(operator)}${groups} did not fit${limit}: ${countOf(batches, 'batch', 'batches')}, ${formatKb(diskKb)} on disk.`
	};
}
