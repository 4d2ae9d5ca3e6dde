import { walkOperators, type PlanOperator } from '../../reading/operator';
import { tableOf, type TableName } from './confirm';

/** Tables read at or below an operator, each once, in the order of the plan. */
export function findTablesBelow(operator: PlanOperator): TableName[] {
	const found = new Map<string, TableName>();
	for (const each of walkOperators(operator)) {
		const table = tableOf(each);
		if (table !== null) found.set(`${table.schema ?? ''}.${table.name}`, table);
	}
	return [...found.values()];
}
