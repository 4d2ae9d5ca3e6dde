import { describe, expect, test } from 'vitest';
import { allNodes, findIn, nodeAt } from '../../../../fixtures/symptom-plans';

describe('generic-plan', () => {
	test('names the parameters whose values were not known', () => {
		expect(findIn('generic-plan-055', 'generic-plan')[0]?.figures).toMatchObject({
			parameters: '$1',
			estimated: 21,
			actual: 133333
		});
	});

	test('takes what an InitPlan returns as known', () => {
		expect(findIn('healthy-087', 'generic-plan')).toEqual([]);
		const returned = findIn('generic-plan-057', 'generic-plan', (root) => {
			const scan = nodeAt(root, '0.0');
			scan.Plans = [
				{
					'Node Type': 'Result',
					'Parent Relationship': 'InitPlan',
					'Subplan Name': 'InitPlan 1 (returns $1)'
				}
			];
		});
		expect(returned).toEqual([]);
	});

	test('leaves a generic plan that fits alone', () => {
		const fits = findIn('generic-plan-055', 'generic-plan', (root) => {
			for (const node of allNodes(root)) node['Plan Rows'] = node['Actual Rows'];
		});
		expect(fits).toEqual([]);
	});

	test('says nothing where the value is known', () => {
		const known = findIn('generic-plan-055', 'generic-plan', (root) => {
			for (const node of allNodes(root))
				if (node['Index Cond'] === '(customer_id = $1)') node['Index Cond'] = '(customer_id = 7)';
		});
		expect(known).toEqual([]);
	});
});
