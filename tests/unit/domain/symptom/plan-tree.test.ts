import { describe, expect, test } from 'vitest';
import { readPlan, type JsonNode } from '../../../fixtures/symptom-plans';
import { toPlanTree } from '$lib/domain/symptom/plan-tree';

/** Paths that may have been stopped early in a plan of these nodes. */
function stoppedIn(root: JsonNode): string[] {
	const plan = readPlan('healthy-060', (captured) => {
		for (const key of Object.keys(captured)) delete captured[key];
		Object.assign(captured, root);
	});
	const tree = toPlanTree(plan.root);
	return tree.operators.filter((operator) => tree.mayStopEarly(operator)).map(({ path }) => path);
}

function node(type: string, more: JsonNode = {}, ...plans: JsonNode[]): JsonNode {
	return { 'Node Type': type, 'Plan Rows': 10, 'Actual Rows': 10, 'Actual Loops': 1, ...more, Plans: plans };
}
const outer = { 'Parent Relationship': 'Outer' };
const inner = { 'Parent Relationship': 'Inner' };

describe('mayStopEarly', () => {
	test('holds below a limit, down to what reads everything', () => {
		expect(stoppedIn(node('Limit', {}, node('Sort', outer, node('Seq Scan', outer))))).toEqual(['0.0']);
		expect(
			stoppedIn(
				node('Limit', {}, node('Nested Loop', outer, node('Seq Scan', outer), node('Index Scan', inner)))
			)
		).toEqual(['0.0', '0.0.0', '0.0.1']);
	});

	test('ends at a hash table and at aggregates that read all', () => {
		const join = node(
			'Hash Join',
			outer,
			node('Seq Scan', outer),
			node('Hash', inner, node('Seq Scan', outer))
		);
		expect(stoppedIn(node('Limit', {}, join))).toEqual(['0.0', '0.0.0', '0.0.1']);
		const plain = node('Aggregate', { ...outer, Strategy: 'Plain' }, node('Seq Scan', outer));
		expect(stoppedIn(node('Limit', {}, plain))).toEqual(['0.0']);
		const sorted = node('Aggregate', { ...outer, Strategy: 'Sorted' }, node('Index Scan', outer));
		expect(stoppedIn(node('Limit', {}, sorted))).toEqual(['0.0', '0.0.0']);
	});

	test('holds at the inner side of a semi join, an anti join and a unique one', () => {
		const loop = (more: JsonNode) =>
			node('Nested Loop', more, node('Seq Scan', outer), node('Index Scan', inner));
		expect(stoppedIn(loop({ 'Join Type': 'Semi' }))).toEqual(['0.1']);
		expect(stoppedIn(loop({ 'Join Type': 'Anti' }))).toEqual(['0.1']);
		expect(stoppedIn(loop({ 'Join Type': 'Inner', 'Inner Unique': true }))).toEqual(['0.1']);
		expect(stoppedIn(loop({ 'Join Type': 'Inner', 'Inner Unique': false }))).toEqual([]);
	});

	test('holds at the inputs of a merge join and in subqueries', () => {
		expect(
			stoppedIn(
				node('Merge Join', {}, node('Index Scan', outer), node('Sort', inner, node('Seq Scan', outer)))
			)
		).toEqual(['0.0', '0.1']);
		expect(stoppedIn(node('Seq Scan', {}, node('Index Scan', { 'Parent Relationship': 'SubPlan' })))).toEqual(
			['0.0']
		);
	});

	test('holds at a probing side for which the hash table was empty', () => {
		const empty = node(
			'Hash',
			{ ...inner, 'Actual Rows': 0 },
			node('Seq Scan', { ...outer, 'Actual Rows': 0 })
		);
		expect(stoppedIn(node('Hash Join', {}, node('Seq Scan', outer), empty))).toEqual(['0.0']);
	});

	test('holds in a WITH query whose reader was stopped', () => {
		const query = node('Seq Scan', { 'Parent Relationship': 'InitPlan', 'Subplan Name': 'CTE recent' });
		const reader = node('CTE Scan', { ...outer, 'CTE Name': 'recent' });
		expect(stoppedIn(node('Limit', {}, query, reader))).toEqual(['0.0', '0.1']);
	});
});
