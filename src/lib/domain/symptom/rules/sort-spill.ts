import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { BLOCK_BYTES, formatBytes, formatKb, formatRows } from '../../sizing/units';
import { countOf, toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighBytes } from '../weight';

export const MOST_SORT_FILES: Threshold = {
	name: 'processes that sort on disk',
	value: 0,
	unit: 'processes',
	why: 'A sort that stays in memory writes nothing; each external one writes all of its rows at least once (tuplesort.c).'
};

/** kB that all processes of a sort left on disk; 0: none did. */
export function sortDiskKb(operator: PlanOperator): number {
	return operator.facts.sorts.reduce((sum, sort) => sum + (sort.onDisk ? (sort.usedKb ?? 0) : 0), 0);
}

/** Whether an operator sorted on disk: a Sort that says so, or an aggregate that wrote files without hashing (ORDER BY, DISTINCT or WITHIN GROUP inside it). */
export function hasSortedOnDisk(operator: PlanOperator): boolean {
	if (operator.facts.sorts.filter((sort) => sort.onDisk).length > MOST_SORT_FILES.value) return true;
	return operator.kind === 'group-aggregate' && (operator.facts.ownTempWrittenBlocks ?? 0) > 0;
}

/** Sorts that did not fit into memory. */
export const sortSpill: SymptomRule = {
	ids: ['sort-spill'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators
			.filter(hasSortedOnDisk)
			.map((operator) => (operator.facts.sorts.length > 0 ? ofSort(operator) : ofAggregate(operator)));
	}
};

function ofSort(sort: PlanOperator): Symptom {
	const onDisk = sort.facts.sorts.filter((each) => each.onDisk);
	const diskKb = sortDiskKb(sort);
	const written = sort.temporaryBytes ?? diskKb * 1024;
	const rows = sort.actualRows === null ? '' : ` of ${formatRows(sort.actualRows)} rows`;
	const limit = sort.memoryLimitKb === null ? '' : ` within ${formatKb(sort.memoryLimitKb)}`;
	const who = onDisk.length > 1 ? ` in ${countOf(onDisk.length, 'process', 'processes')}` : '';
	return {
		id: 'sort-spill',
		operator: sort.path,
		weight: weighBytes(written),
		figures: toFigures({
			method: onDisk[0]?.method ?? null,
			diskKb,
			passes: diskKb > 0 ? Math.max(1, Math.round(written / 1024 / diskKb)) : null,
			limitKb: sort.memoryLimitKb,
			temporaryBytes: written,
			processes: onDisk.length > 1 ? onDisk.length : null
		}),
		summary: `The ${phraseOperator(sort)}${rows} did not fit${limit}: ${formatKb(diskKb)} on disk${who}.`
	};
}

function ofAggregate(aggregate: PlanOperator): Symptom {
	const bytes = (aggregate.facts.ownTempWrittenBlocks ?? 0) * BLOCK_BYTES;
	const limit = aggregate.memoryLimitKb === null ? '' : ` within ${formatKb(aggregate.memoryLimitKb)}`;
	return {
		id: 'sort-spill',
		operator: aggregate.path,
		weight: weighBytes(bytes),
		figures: toFigures({
			method: 'inside an aggregate',
			limitKb: aggregate.memoryLimitKb,
			temporaryBytes: bytes
		}),
		summary: `An ordered or distinct aggregate of the ${phraseOperator(aggregate)} sorted its rows on disk${limit === '' ? '' : `: they did not fit${limit}`}; ${formatBytes(bytes)} went to temporary files.`
	};
}
