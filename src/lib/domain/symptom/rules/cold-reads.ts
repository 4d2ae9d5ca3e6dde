import type { Symptom } from '../../reading/reading';
import { BLOCK_BYTES, formatBytes, formatRows } from '../../sizing/units';
import { toFigures } from '../figures';
import type { RuleInput, SymptomRule } from '../symptom';
import type { Threshold } from '../threshold';
import { weighShare } from '../weight';

export const LEAST_BLOCKS: Threshold = {
	name: 'blocks touched',
	value: 10_000,
	unit: 'blocks',
	why: '80 MB: less is read in well under a second even from slow storage.'
};
export const LEAST_READ_SHARE: Threshold = {
	name: 'share of blocks not in the cache',
	value: 0.8,
	unit: 'share',
	why: 'A working cache holds most of what a repeated statement needs; four fifths from outside mean that it was cold or far too small.'
};

/** Plans whose blocks came from outside the shared buffers. */
export const coldReads: SymptomRule = {
	ids: ['cold-reads'],
	find({ plan }: RuleInput): Symptom[] {
		const { sharedHitBlocks: hit, sharedReadBlocks: read } = plan.root.facts;
		if (read === null) return [];
		const all = (hit ?? 0) + read;
		if (all < LEAST_BLOCKS.value || read < all * LEAST_READ_SHARE.value) return [];
		return [
			{
				id: 'cold-reads',
				operator: null,
				weight: weighShare((read / all) * 0.6),
				figures: toFigures({ hit: hit ?? 0, read, share: Math.round((read / all) * 1000) / 1000 }),
				summary: `${formatRows(read)} of ${formatRows(all)} blocks (${formatBytes(read * BLOCK_BYTES)}) were not in the database's cache.`
			}
		];
	}
};
