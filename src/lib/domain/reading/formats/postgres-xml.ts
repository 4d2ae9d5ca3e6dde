import { SaxesParser } from 'saxes';
import { BOUNDS } from '../bounds';
import { maskXmlPlan } from '../masking/mask-xml-plan';
import type { FormatResult, Plan, ReadingWarning } from '../reading';
import { nothingRead, type TextFormat } from './format-reader';
import { isRecord, records, wordList, type PlanNode } from './postgres/plan-node';
import { toPlan } from './postgres/to-plan';
import { statementAbove } from './statement-above';
import { blankDecoration } from './undecorate';
import { keyOfTag } from './xml-tags';

/** EXPLAIN (FORMAT XML) of PostgreSQL, also as pasted out of psql. */
export const postgresXml: TextFormat = {
	format: 'postgres-xml',
	engine: 'postgresql',
	kind: 'plan',
	recognise: (head) =>
		/<explain\b[^>]*postgresql|<(?:Plan|Query)>[\s+|\u21b5]*(?:<Plan>[\s+|\u21b5]*)?<Node-Type>/.test(head),
	mask: maskXmlPlan,
	read: readPostgresXml
};

/** Each element becomes a list of its children under their keys, or its text. */
interface Element {
	key: string;
	text: string;
	members: PlanNode;
	items: unknown[];
	hasChildren: boolean;
}

const LISTS = new Set(['Plans', 'Workers', 'Triggers', 'Grouping Sets', 'Group Keys', 'Hash Keys']);

/** Plans of an XML text; what stands behind a fault is lost, what stands before it is kept. */
export function readPostgresXml(text: string): FormatResult {
	const clean = blankDecoration(text);
	const start = clean.search(/<(?:\?xml|explain|Query|Plan)\b/);
	const warnings: ReadingWarning[] = [];
	const root = start < 0 ? null : parse(clean, start, warnings);
	const { statement } = statementAbove(clean.slice(0, Math.max(start, 0)).split('\n'));
	const plans: Plan[] = [];
	for (const envelope of root === null ? [] : envelopesOf(root)) {
		if (statement !== null) envelope['Query Text'] ??= statement;
		const plan = toPlan(envelope, []);
		if (plan !== null) plans.push(plan);
	}
	return { ...nothingRead(warnings), plans };
}

function envelopesOf(root: PlanNode): PlanNode[] {
	const explain = records(root['explain']);
	const within = explain.length > 0 ? explain : [root];
	return within.flatMap((each) => (isRecord(each['Plan']) ? [each] : records(each['Query'])));
}

function parse(text: string, start: number, warnings: ReadingWarning[]): PlanNode {
	const root: Element = { key: '', text: '', members: {}, items: [], hasChildren: true };
	const open: Element[] = [root];
	const parser = new SaxesParser({ position: true });
	let failed = false;
	parser.on('error', () => {
		if (!failed) {
			const at = { line: lineOf(text, start) + parser.line - 1, column: parser.column + 1 };
			const message = `The XML ends or breaks at line ${at.line}, column ${at.column}; what stands before was read.`;
			warnings.push({ code: 'damaged', message, at });
		}
		failed = true;
	});
	parser.on('opentag', ({ name }) => {
		const parent = open[open.length - 1];
		if (parent !== undefined) parent.hasChildren = true;
		open.push({ key: keyOfTag(name), text: '', members: {}, items: [], hasChildren: false });
		// A node takes two levels of XML.
		if (open.length > BOUNDS.nesting * 2 + 10) failed = true;
	});
	parser.on('text', (piece) => {
		const top = open[open.length - 1];
		if (top !== undefined) top.text += piece;
	});
	parser.on('closetag', () => close(open));
	const chunk = 64 * 1024;
	for (let at = start; at < text.length && !failed; at += chunk) parser.write(text.slice(at, at + chunk));
	if (!failed) parser.close();
	while (open.length > 1) close(open);
	return root.members;
}

function close(open: Element[]): void {
	const element = open.pop();
	const parent = open[open.length - 1];
	if (element === undefined || parent === undefined) return;
	const value = valueOf(element);
	if (element.key === 'Incremental Sort Groups' && isRecord(value)) {
		// The XML form has one tag for both; full-sort groups come first (explain.c).
		const key = parent.members['Full-sort Groups'] === undefined ? 'Full-sort Groups' : 'Pre-sorted Groups';
		parent.members[key] = nameSortSpaces(value);
		return;
	}
	if (element.key === 'Item' || LISTS.has(parent.key)) parent.items.push(value);
	else {
		const known = parent.members[element.key];
		parent.members[element.key] =
			known === undefined
				? value
				: Array.isArray(known) && isRecord(value)
					? [...known, value]
					: [known, value];
	}
}

function valueOf(element: Element): unknown {
	if (element.items.length > 0) return element.items;
	return element.hasChildren ? element.members : element.text.trim() === '' ? '' : element.text;
}

/** Memory before disk, in one tag; where only one is there, the methods tell which. */
function nameSortSpaces(group: PlanNode): PlanNode {
	const spaces = records(group['Sort Space']);
	const onlyDisk =
		spaces.length === 1 && wordList(group['Sort Methods Used']).every((each) => each.startsWith('external'));
	const [first, second] = spaces;
	return onlyDisk
		? { ...group, 'Sort Space Disk': first }
		: { ...group, 'Sort Space Memory': first, 'Sort Space Disk': second };
}

function lineOf(text: string, offset: number): number {
	let line = 1;
	for (let at = text.indexOf('\n'); at >= 0 && at < offset; at = text.indexOf('\n', at + 1)) line++;
	return line;
}
