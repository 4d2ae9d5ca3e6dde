import type { Operator } from '$lib/domain/reading/operator';
import { formatBytes, formatKb, formatMs, formatRows } from '$lib/domain/sizing/units';
import { nameOperator } from './operator-words';

/** One operator as a row of the ledger: every cell as text, empty where the evidence holds no figure. */
export interface LedgerRow {
	operator: Operator;
	depth: number;
	what: string;
	how: string | null;
	expected: string;
	actual: string;
	ownTime: string;
	/** "8 / 8 MB" */
	memory: string;
	temporary: string;
	discarded: string;
	onTrail: boolean;
	/** It wrote to disk. */
	over: boolean;
}

/** A figure as text; nothing where there is none. */
function write(value: number | null, format: (value: number) => string): string {
	return value === null ? '' : format(value);
}

/** Used and allowed; a limit alone tells something only where it was overflowed. */
function writeMemory(operator: Operator): string {
	const overflowed = (operator.temporaryBytes ?? 0) > 0 || (operator.batches ?? 1) > 1;
	if (operator.memoryKb === null && (operator.memoryLimitKb === null || !overflowed)) return '';
	const used = operator.memoryKb === null ? '?' : formatKb(operator.memoryKb);
	return operator.memoryLimitKb === null ? used : `${used} / ${formatKb(operator.memoryLimitKb)}`;
}

/** The tree as rows, read top-down as the engine prints it. */
export function toLedgerRows(root: Operator, trail: ReadonlySet<string>): LedgerRow[] {
	const rows: LedgerRow[] = [];
	const stack = [{ operator: root, depth: 0 }];
	for (let next = stack.pop(); next !== undefined; next = stack.pop()) {
		const { operator, depth } = next;
		const { what, how } = nameOperator(operator);
		const batches =
			operator.batches !== null && operator.batches > 1
				? `${operator.batches} batches${operator.plannedBatches === null ? '' : `, ${operator.plannedBatches} planned`}`
				: null;
		rows.push({
			operator,
			depth,
			what,
			how: [how, batches].filter((part) => part !== null).join(' · ') || null,
			expected: write(operator.estimatedRows, formatRows),
			actual: write(operator.actualRows, formatRows),
			ownTime: write(operator.selfMs, formatMs),
			memory: writeMemory(operator),
			temporary: operator.temporaryBytes === 0 ? '' : write(operator.temporaryBytes, formatBytes),
			discarded: operator.discardedRows === 0 ? '' : write(operator.discardedRows, formatRows),
			onTrail: trail.has(operator.path),
			over: (operator.temporaryBytes ?? 0) > 0
		});
		for (let i = operator.children.length - 1; i >= 0; i--) {
			const child = operator.children[i];
			if (child !== undefined) stack.push({ operator: child, depth: depth + 1 });
		}
	}
	return rows;
}

/** The power of ten at which the ruler of a whole ledger ends: room for its largest row count. */
export function ledgerDecades(rows: readonly LedgerRow[]): number {
	let most = 10;
	for (const { operator } of rows)
		most = Math.max(most, operator.estimatedRows ?? 0, operator.actualRows ?? 0);
	return Math.max(3, Math.ceil(Math.log10(most) - 1e-9));
}
