import type { PlanOperator } from '../../reading/operator';
import { inspectSide, tokenise } from '../expressions';
import type { CauseInput, CauseRule } from './cause-rule';
import { columnStatistics, qualifiedName, quoteName } from './confirm';
import { findTablesBelow } from './tables';

const CERTAIN = 0.92;

/** A join key of which a few values (or NULL) make up most rows. */
export const skewedJoinKey: CauseRule = (input) => {
	const [hash] = input.operatorsWith('skewed-hash');
	if (hash === undefined) return null;
	return {
		id: 'skewed-join-key',
		confidence: CERTAIN,
		because: ['skewed-hash', 'hash-spill'],
		against: [],
		confirm: confirmKey(hash, input)
	};
};

function confirmKey(hash: PlanOperator, { tree }: CauseInput): string[] {
	const [table, ...others] = findTablesBelow(hash);
	const condition = tree.parentOf(hash)?.facts.hashCondition ?? null;
	if (table === undefined || condition === null) return [];
	const [column] = inspectSide(tokenise(condition)).columns.slice(-1);
	if (column === undefined || others.length > 0)
		return [columnStatistics(table, column === undefined ? [] : [column])];
	const key = quoteName(column);
	return [
		columnStatistics(table, [column]),
		`SELECT ${key}, count(*) FROM ${qualifiedName(table)} GROUP BY ${key} ORDER BY count(*) DESC LIMIT 10;`
	];
}
