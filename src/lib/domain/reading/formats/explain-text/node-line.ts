import type { PlanNode } from '../postgres/plan-node';
import { takeName } from './node-words';

const COST = /\(cost=([\d.]+)\.\.([\d.]+) rows=([\d.]+) width=(\d+)\)/;
const ACTUAL = /\(actual (?:time=([\d.]+)\.\.([\d.]+) )?rows=([\d.]+) loops=(\d+)\)/;
const NEVER = '(never executed)';

/**
 * The node of a line, arrow already taken off; null where the line is something else.
 *
 *     Index Scan using i_line on freight.invoice_line l  (cost=0.42..8.44 rows=1 width=22) (actual time=…)
 *     ^name            ^index    ^schema ^relation    ^alias
 */
export function readNodeLine(text: string, underArrow: boolean): PlanNode | null {
	const cost = COST.exec(text);
	const actual = ACTUAL.exec(text);
	const never = actual === null && text.includes(NEVER);
	const node: PlanNode = {};
	const end = cost?.index ?? actual?.index ?? (never ? text.indexOf(NEVER) : text.length);
	const known = takeHeading(text.slice(0, end).trim(), node);
	if (!known && !underArrow && cost === null && actual === null && !never) return null;
	if (cost !== null) {
		node['Startup Cost'] = cost[1];
		node['Total Cost'] = cost[2];
		node['Plan Rows'] = cost[3];
		node['Plan Width'] = cost[4];
	}
	if (actual !== null) {
		if (actual[2] !== undefined) {
			node['Actual Startup Time'] = actual[1];
			node['Actual Total Time'] = actual[2];
		}
		node['Actual Rows'] = actual[3];
		node['Actual Loops'] = actual[4];
	} else if (never) {
		node['Actual Loops'] = 0;
	}
	return node;
}

function takeHeading(heading: string, node: PlanNode): boolean {
	const on = heading.indexOf(' on ');
	let name = on < 0 ? heading : heading.slice(0, on);
	const target = on < 0 ? null : heading.slice(on + ' on '.length);
	const using = name.indexOf(' using ');
	if (using >= 0) {
		node['Index Name'] = readIdentifiers(name.slice(using + ' using '.length))[0];
		name = name.slice(0, using);
		node['Scan Direction'] = 'Forward';
		if (name.endsWith(' Backward')) {
			node['Scan Direction'] = 'Backward';
			name = name.slice(0, -' Backward'.length);
		}
	}
	const known = takeName(name, node);
	if (target !== null) takeTarget(target, node);
	return known;
}

/** "schema.relation alias", each part perhaps quoted; what it names depends on the node. */
function takeTarget(target: string, node: PlanNode): void {
	const [first, second, third] = readIdentifiers(target);
	const type = node['Node Type'];
	if (type === 'Bitmap Index Scan') {
		node['Index Name'] = first;
		return;
	}
	if (type === 'Subquery Scan' || type === 'Values Scan') {
		node['Alias'] = first;
		return;
	}
	const qualified = /^(?:"(?:[^"]|"")*"|[^\s".]+)\./.test(target);
	if (qualified) node['Schema'] = first;
	const named = qualified ? second : first;
	node[NAMED_BY[String(type)] ?? 'Relation Name'] = named;
	node['Alias'] = (qualified ? third : second) ?? named;
}

const NAMED_BY: Record<string, string> = {
	'CTE Scan': 'CTE Name',
	'WorkTable Scan': 'CTE Name',
	'Function Scan': 'Function Name',
	'Table Function Scan': 'Table Function Name',
	'Named Tuplestore Scan': 'Tuplestore Name'
};

function readIdentifiers(text: string): string[] {
	const parts: string[] = [];
	for (const match of text.matchAll(/"((?:[^"]|"")*)"|[^\s".]+/g)) {
		parts.push(match[1] === undefined ? match[0] : match[1].replaceAll('""', '"'));
	}
	return parts;
}
