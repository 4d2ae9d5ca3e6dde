import type { PlanOperator } from '../../reading/operator';
import { formatRows } from '../../sizing/units';
import { found, type CauseRule } from './cause-rule';
import { cacheState, settingsNamed, tableOf, vacuumState } from './confirm';
import { findTablesBelow } from './tables';

const CERTAIN = 0.92;
const ALONE = 0.8;
const BESIDE_ANOTHER = 0.55;

/** Tables smaller than this (8 MB) cost nothing, however empty their pages. */
const LEAST_BLOCKS = 1000;
/** A page holds 8 kB: a dozen rows or more are rows of up to 680 bytes, as most tables have. Fewer are wide rows, or dead ones and free space. */
const MOST_ROWS_PER_BLOCK = 12;
/** Rows of more than 2 kB are stored outside the page (TOAST), so that fewer than this can hardly be wide rows. */
const THIN_ROWS_PER_BLOCK = 4;
/** Average output width beyond which few rows a page are no wonder. */
const WIDE_ROW_BYTES = 1000;
/** Fewer rows than pages: no table is like that by design. */
const EMPTY_PAGES = 0.9;
const THIN_PAGES = 0.84;
/** Only a hint: wide rows look the same. */
const SPARSE_PAGES = 0.4;

/** A visibility map behind the changes: pages not marked all-visible since the last vacuum. */
export const staleVisibilityMap: CauseRule = (input) => {
	const [scan] = input.operatorsWith('heap-fetches-high');
	const table = scan === undefined ? null : tableOf(scan);
	if (scan === undefined) return null;
	return {
		id: 'stale-visibility-map',
		confidence: CERTAIN,
		because: ['heap-fetches-high'],
		against: [],
		confirm: table === null ? [] : [vacuumState(table)]
	};
};

/** Tables full of dead rows or free space: many pages read for few rows. */
export const tableBloat: CauseRule = (input) => {
	for (const scan of input.tree.operators) {
		const rowsPerBlock = readDensity(scan);
		const table = tableOf(scan);
		if (rowsPerBlock === null || table === null || rowsPerBlock >= MOST_ROWS_PER_BLOCK) continue;
		return {
			id: 'table-bloat',
			confidence: weighDensity(rowsPerBlock),
			because: found(input, ['row-overestimate', 'cold-reads']),
			against: [
				`${formatRows(Math.round(rowsPerBlock * 100) / 100)} rows a page could also be very wide rows.`
			],
			confirm: [vacuumState(table)]
		};
	}
	return null;
};

function weighDensity(rowsPerBlock: number): number {
	if (rowsPerBlock < 1) return EMPTY_PAGES;
	return rowsPerBlock < THIN_ROWS_PER_BLOCK ? THIN_PAGES : SPARSE_PAGES;
}

/** Blocks that an operator touched itself: the engine counts those of its subqueries in. */
function ownBlocks(operator: PlanOperator): number | null {
	const own = blocksOf(operator);
	return own === null ? null : operator.children.reduce((rest, child) => rest - (blocksOf(child) ?? 0), own);
}

function blocksOf({ facts }: PlanOperator): number | null {
	const { sharedHitBlocks: hit, sharedReadBlocks: read } = facts;
	return hit === null && read === null ? null : (hit ?? 0) + (read ?? 0);
}

/** Rows that a sequential scan found on each page; null: no such scan, too small, or no block counts. */
function readDensity(scan: PlanOperator): number | null {
	if (scan.kind !== 'seq-scan' || (scan.width ?? 0) > WIDE_ROW_BYTES) return null;
	const { actualRowsPerLoop, removedByFilter } = scan.facts;
	const blocks = ownBlocks(scan);
	if (actualRowsPerLoop === null || blocks === null) return null;
	const rows = (actualRowsPerLoop + (removedByFilter ?? 0)) * (scan.loops ?? 1);
	return blocks < LEAST_BLOCKS ? null : rows / blocks;
}

/** Caches that had not been filled yet: after a restart, a switch-over, or for data that is seldom read. */
export const coldCache: CauseRule = (input) => {
	if (!input.has('cold-reads')) return null;
	const beside = input.has('filter-discards-most') || (tableBloat(input)?.confidence ?? 0) > SPARSE_PAGES;
	const tables = findTablesBelow(input.plan.root);
	return {
		id: 'cold-cache',
		confidence: beside ? BESIDE_ANOTHER : ALONE,
		because: ['cold-reads'],
		against: ['If a second run reads as much from outside, the cache is too small for it rather than cold.'],
		confirm: [
			settingsNamed(['shared_buffers', 'effective_cache_size']),
			...tables.slice(0, 1).map(cacheState)
		]
	};
};
