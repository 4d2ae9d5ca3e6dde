import {
	aggregateNeededKb,
	groupBytes,
	plannedEntryBytes,
	plannedPartitions,
	type GroupShape
} from './aggregate';
import { exposureKb } from './exposure';
import { chooseHashTable, hashNeededKb, hashTemporaryBytes, hashWorkMemKb } from './hash';
import {
	defaultHashMemMultiplier,
	LEAST_WORK_MEM_KB,
	postgresLayout,
	readMajorVersion,
	type MemoryLayout
} from './layout';
import type { Sizing, SizingInput, SizingRow } from './sizing';
import { sortDiskBytes, sortNeededKb, sortPasses } from './sort';
import { computeTextbookSizing } from './textbook-sizing';

/** The multiples of the present setting that the table shows. */
const TABLE_MULTIPLES = [1 / 4, 1 / 2, 1, 2, 4];

/** By-value aggregates assumed where nothing says what is aggregated: one chunk holds up to two. */
const ASSUMED_TRANSITIONS = 2;

/** What one kind of operator needs, and what happens at a setting. */
interface Rule {
	neededKb: number;
	/** Smallest sufficient setting, kB. */
	settingKb: number;
	at(settingKb: number): Pick<SizingRow, 'batches' | 'passes' | 'temporaryBytes'>;
	formula: string;
	source: string;
}

/**
 * Memory that keeps a hash table, a sort or a hash aggregate of these rows in memory, and what happens at the present
 * setting and around it. PostgreSQL by its own rules; other engines by the textbook, and marked so.
 */
export function computeSizing(input: SizingInput): Sizing {
	const engine = input.engine ?? 'postgresql';
	if (engine !== 'postgresql' && engine !== 'unknown') return computeTextbookSizing(input, engine);
	const version = readMajorVersion(input.engineVersion ?? null);
	const layout = postgresLayout(version);
	const multiplier = input.hashMemMultiplier ?? defaultHashMemMultiplier(version);
	const rule = ruleOf(layout, input, multiplier);
	const rowAt = (settingKb: number): SizingRow => ({
		settingKb,
		...rule.at(settingKb),
		exposureKb: exposureOf(input, settingKb, multiplier)
	});
	return {
		neededKb: Math.ceil(rule.neededKb),
		setting: { name: 'work_mem', valueKb: Math.max(LEAST_WORK_MEM_KB, Math.ceil(rule.settingKb)) },
		...rule.at(input.memoryKb),
		exposureKb: exposureOf(input, input.memoryKb, multiplier),
		table: TABLE_MULTIPLES.map((multiple) => rowAt(input.memoryKb * multiple)),
		formula: rule.formula,
		source: rule.source
	};
}

function exposureOf(input: SizingInput, settingKb: number, hashMemMultiplier: number): number {
	const nodes = input.nodes ?? 1;
	return Math.ceil(
		exposureKb({
			settingKb,
			sessions: input.sessions ?? 1,
			hashNodes: input.kind === 'sort' ? 0 : nodes,
			otherNodes: input.kind === 'sort' ? nodes : 0,
			hashMemMultiplier,
			workers: input.workers ?? 0
		})
	);
}

function ruleOf(layout: MemoryLayout, input: SizingInput, multiplier: number): Rule {
	switch (input.kind) {
		case 'hash':
			return hashRule(layout, input, multiplier);
		case 'sort':
			return sortRule(layout, input);
		case 'aggregate':
			return aggregateRule(layout, input, multiplier);
	}
}

function hashRule(layout: MemoryLayout, input: SizingInput, multiplier: number): Rule {
	const hash = {
		rows: input.rows,
		widthBytes: input.width,
		hashMemMultiplier: multiplier,
		participants: 1,
		skewPossible: true
	};
	return {
		neededKb: hashNeededKb(layout, input.rows, input.width),
		settingKb: hashWorkMemKb(layout, hash),
		at(workMemKb) {
			const { batches } = chooseHashTable(layout, {
				...hash,
				workMemKb: Math.max(LEAST_WORK_MEM_KB, workMemKb)
			});
			const temporaryBytes = Math.round(hashTemporaryBytes(layout, batches, input.rows, input.width));
			return { batches, passes: null, temporaryBytes };
		},
		formula: `rows × (${layout.hashTupleOverheadBytes} + ${layout.minimalTupleHeaderBytes} + width rounded up to 8) + ${layout.pointerBytes} × buckets (a power of two, at least the rows); work_mem = that ÷ hash_mem_multiplier ÷ 0.98. Temporary bytes are the build side's alone: the probing side writes the same share of itself.`,
		source: `PostgreSQL ${layout.version}, ExecChooseHashTableSize (nodeHash.c), 64-bit`
	};
}

function sortRule(layout: MemoryLayout, input: SizingInput): Rule {
	const sort = { rows: input.rows, widthBytes: input.width, bound: null };
	const neededKb = sortNeededKb(layout, sort);
	return {
		neededKb,
		settingKb: neededKb,
		at(workMemKb) {
			const passes = sortPasses(layout, sort, workMemKb);
			const temporaryBytes = Math.round(sortDiskBytes(layout, input.rows, input.width) * passes);
			return { batches: null, passes, temporaryBytes };
		},
		formula: `(rows + 1) × (${layout.sortSlotBytes} for the slot + ${layout.sortChunkHeaderBytes ?? layout.allocSetHeaderBytes} + (${layout.minimalTupleHeaderBytes} + width) rounded up). In parallel plans every process sorts its own share.`,
		source: `PostgreSQL ${layout.version}, tuplesort.c, 64-bit`
	};
}

function aggregateRule(layout: MemoryLayout, input: SizingInput, multiplier: number): Rule {
	const shape: GroupShape = { keyBytes: input.width, transitions: ASSUMED_TRANSITIONS, states: [] };
	const neededKb = aggregateNeededKb(layout, input.rows, shape, multiplier);
	const entryBytes = plannedEntryBytes(layout, input.width);
	return {
		neededKb,
		settingKb: neededKb / multiplier,
		at(workMemKb) {
			const limitKb = Math.max(LEAST_WORK_MEM_KB, workMemKb) * multiplier;
			if (neededKb <= limitKb) return { batches: 1, passes: null, temporaryBytes: 0 };
			const partitions = Math.max(4, plannedPartitions(input.rows, entryBytes, limitKb));
			const spilledGroups = input.rows * (1 - limitKb / neededKb);
			const temporaryBytes = Math.round(spilledGroups * (4 + layout.minimalTupleHeaderBytes + input.width));
			return { batches: partitions + 1, passes: null, temporaryBytes };
		},
		formula: `bucket array (${layout.aggregateBucketBytes} × a power of two above groups ÷ 0.72) + groups × ${groupBytes(layout, shape)} (key and up to two by-value results), whole context blocks; numeric sums and averages add about 350 bytes a group. Batches and temporary bytes are lower bounds: every further row of a spilled group is written too.`,
		source: `PostgreSQL ${layout.version}, nodeAgg.c, 64-bit`
	};
}
