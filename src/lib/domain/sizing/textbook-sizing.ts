import type { Engine } from '../reading/reading';
import { exposureKb } from './exposure';
import type { Sizing, SizingInput, SizingRow } from './sizing';
import { externalSortPasses, HASH_FUDGE } from './textbook';
import { BLOCK_BYTES, BYTES_PER_KB } from './units';

/** The setting that bounds each kind of operator; where the engine grants memory itself, the grant. */
const SETTINGS: Record<'mariadb' | 'mysql' | 'showplan', Record<SizingInput['kind'], string>> = {
	mariadb: { hash: 'join_buffer_size', sort: 'sort_buffer_size', aggregate: 'tmp_memory_table_size' },
	mysql: { hash: 'join_buffer_size', sort: 'sort_buffer_size', aggregate: 'tmp_table_size' },
	showplan: { hash: 'memory grant', sort: 'memory grant', aggregate: 'memory grant' }
};

/**
 * The textbook bound for engines whose own rule is not public: F × the rows' size in memory, partitions of the
 * memory given otherwise (GRACE), or an external merge sort. Marked as such in formula and source.
 */
export function computeTextbookSizing(
	input: SizingInput,
	engine: Exclude<Engine, 'postgresql' | 'unknown'>
): Sizing {
	const dataKb = (input.rows * input.width) / BYTES_PER_KB;
	const neededKb = input.kind === 'sort' ? dataKb : dataKb * HASH_FUDGE;
	const rowAt = (settingKb: number): SizingRow => ({
		settingKb,
		...spillAt(input, dataKb, neededKb, settingKb),
		exposureKb: Math.ceil(
			exposureKb({
				settingKb,
				sessions: input.sessions ?? 1,
				hashNodes: 0,
				otherNodes: input.nodes ?? 1,
				hashMemMultiplier: 1,
				workers: input.workers ?? 0
			})
		)
	});
	const { settingKb: _present, ...present } = rowAt(input.memoryKb);
	return {
		neededKb: Math.ceil(neededKb),
		setting: { name: SETTINGS[engine][input.kind], valueKb: Math.ceil(neededKb) },
		...present,
		table: [1 / 4, 1 / 2, 1, 2, 4].map((multiple) => rowAt(input.memoryKb * multiple)),
		formula:
			input.kind === 'sort'
				? 'Textbook bound, not the engine’s own rule: rows × width; passes = 1 + ceil(log_{B-1}(N/B)) over 8 kB pages.'
				: `Textbook bound, not the engine’s own rule: ${HASH_FUDGE} × rows × width; batches = that ÷ memory.`,
		source:
			input.kind === 'sort'
				? 'External merge sort, Ramakrishnan/Gehrke ch. 13'
				: 'Partitioned hash join, Shapiro, TODS 11(3) 1986'
	};
}

function spillAt(
	input: SizingInput,
	dataKb: number,
	neededKb: number,
	settingKb: number
): Pick<SizingRow, 'batches' | 'passes' | 'temporaryBytes'> {
	const fits = neededKb <= settingKb;
	if (input.kind !== 'sort') {
		const batches = fits ? 1 : Math.max(2, Math.ceil(neededKb / settingKb));
		const temporaryBytes = Math.round(dataKb * BYTES_PER_KB * (1 - 1 / batches));
		return { batches, passes: null, temporaryBytes };
	}
	const pages = (dataKb * BYTES_PER_KB) / BLOCK_BYTES;
	const buffers = Math.max(3, Math.floor((settingKb * BYTES_PER_KB) / BLOCK_BYTES));
	// The last pass is read as it is merged and not written again.
	const passes = fits ? 0 : externalSortPasses(pages, buffers) - 1;
	return { batches: null, passes, temporaryBytes: Math.round(dataKb * BYTES_PER_KB * passes) };
}
