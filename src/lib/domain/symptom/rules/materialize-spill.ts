import type { PlanOperator } from '../../reading/operator';
import { phraseOperator } from '../../reading/operator-phrase';
import type { Symptom } from '../../reading/reading';
import { BLOCK_BYTES, formatBytes, formatKb } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighBytes } from '../weight';

export const MOST_STORED_BLOCKS: Threshold = {
	name: 'temporary blocks of a row store',
	value: 0,
	unit: 'blocks',
	why: 'A store that fits work_mem writes none (tuplestore.c).'
};

const STORES: readonly PlanOperator['kind'][] = ['materialize', 'cte-scan', 'window', 'function-scan'];

function keepsRows(operator: PlanOperator): boolean {
	return STORES.includes(operator.kind) || operator.name === 'Recursive Union';
}

/** Bytes that a row store wrote; 0: none, or not in the evidence. From 18 on the engine names the store's own size. */
export function storedBytes(operator: PlanOperator): number {
	if (!keepsRows(operator)) return 0;
	const blocks = operator.facts.ownTempWrittenBlocks ?? 0;
	if (blocks > MOST_STORED_BLOCKS.value) return blocks * BLOCK_BYTES;
	const { storage } = operator.facts;
	return storage?.onDisk === true ? (storage.maximumKb ?? 0) * 1024 : 0;
}

/** Rows kept aside (WITH queries, windows, materialised inputs, functions) that did not fit. */
export const materializeSpill: SymptomRule = {
	ids: ['materialize-spill'],
	find({ tree }: RuleInput): Symptom[] {
		return tree.operators
			.filter((operator) => storedBytes(operator) > 0)
			.map((operator) => {
				const bytes = storedBytes(operator);
				const limit = operator.memoryLimitKb === null ? 'memory' : formatKb(operator.memoryLimitKb);
				return {
					id: 'materialize-spill' as const,
					operator: operator.path,
					weight: weighBytes(bytes),
					figures: toFigures({ temporaryBytes: bytes, limitKb: operator.memoryLimitKb }),
					summary: `The rows that the ${phraseOperator(operator)} keeps aside did not fit into ${limit}: ${formatBytes(bytes)} went to temporary files.`
				};
			});
	}
};
