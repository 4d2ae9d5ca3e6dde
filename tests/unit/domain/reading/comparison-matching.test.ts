import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chooseReadings, choosePlans } from '$lib/domain/reading/comparison/choose-readings';
import { matchOperators } from '$lib/domain/reading/comparison/match-operators';
import { orderCondition } from '$lib/domain/reading/comparison/operator-meaning';
import type { Operator, OperatorKind } from '$lib/domain/reading/operator';
import { readOne } from '../../../fixtures/evidence-files';
import { makeOperator } from '../../../fixtures/factories/reading';

interface Sketch {
	kind: OperatorKind;
	relation?: string;
	condition?: string | undefined;
	children?: Sketch[];
}

/** An operator tree out of what matters for matching, with its paths. */
function draw(sketch: Sketch, path = '0'): Operator {
	const { kind, relation = null, condition = null, children = [] } = sketch;
	return makeOperator({
		path,
		kind,
		name: kind,
		relation,
		alias: relation,
		condition,
		children: children.map((child, index) => draw(child, `${path}.${index}`))
	});
}

const scan = (relation: string, kind: OperatorKind = 'seq-scan'): Sketch => ({ kind, relation });
const hashJoin = (condition: string, outer: Sketch, inner: Sketch): Sketch => ({
	kind: 'hash-join',
	condition,
	children: [outer, { kind: 'hash-build', children: [inner] }]
});

/** The pairs as "path → path". */
function match(before: Sketch, after: Sketch): string[] {
	return matchOperators(draw(before), draw(after)).map(
		(pair) => `${pair.before?.operator.path ?? 'none'} → ${pair.after?.operator.path ?? 'none'}`
	);
}

/** Any plan of a few tables, with conditions that recur. */
const { plan: anyPlan } = fc.letrec<{ plan: Sketch }>((tie) => ({
	plan: fc.oneof(
		{ depthSize: 'small' },
		fc.record({
			kind: fc.constantFrom<OperatorKind>('seq-scan', 'index-scan', 'cte-scan'),
			relation: fc.constantFrom('a', 'b', 'c', 'd')
		}),
		fc.record({
			kind: fc.constantFrom<OperatorKind>(
				'hash-join',
				'nested-loop',
				'sort',
				'hash-aggregate',
				'append',
				'limit'
			),
			condition: fc.constantFrom(undefined, 'a.x = b.x', 'b.y = c.y', 'c.z'),
			children: fc.array(tie('plan'), { minLength: 1, maxLength: 3 })
		})
	)
}));

describe('matchOperators', () => {
	it('pairs no table with another one', () => {
		expect(match(scan('invoice'), scan('booking'))).toEqual(['0 → none', 'none → 0']);
	});

	it('does not take one sort for another that sorts other tables by other keys', () => {
		const sort = (condition: string, input: Sketch): Sketch => ({
			kind: 'sort',
			condition,
			children: [input]
		});
		expect(match(sort('a', scan('invoice')), sort('b', scan('booking')))).toContain('0 → none');
	});

	it('keeps joins that come in another order', () => {
		const first = hashJoin('(a.x = b.x)', hashJoin('(b.y = c.y)', scan('b'), scan('c')), scan('a'));
		const second = hashJoin('(c.y = b.y)', hashJoin('(b.x = a.x)', scan('b'), scan('a')), scan('c'));
		expect(match(first, second)).toEqual([
			'0 → 0.0',
			'0.0 → 0',
			'0.0.0 → 0.0.0',
			'0.0.1 → 0.1',
			'0.0.1.0 → 0.1.0',
			'0.1 → 0.0.1',
			'0.1.0 → 0.0.1.0'
		]);
	});

	it('takes a table for the same however it is read', () => {
		expect(match(scan('invoice'), { kind: 'limit', children: [scan('invoice', 'index-scan')] })).toEqual([
			'0 → 0.0',
			'none → 0'
		]);
	});

	it('pairs equals by their place first', () => {
		const twice = (inputs: Sketch[]): Sketch => ({ kind: 'append', children: inputs });
		expect(match(twice([scan('a'), scan('a')]), twice([scan('a'), scan('a')]))).toEqual([
			'0 → 0',
			'0.0 → 0.0',
			'0.1 → 0.1'
		]);
	});

	it('pairs each operator of any tree with itself, and any two trees alike both ways', () => {
		fc.assert(
			fc.property(anyPlan, anyPlan, (one, other) => {
				expect(match(one, one).filter((pair) => pair.split(' → ')[0] !== pair.split(' → ')[1])).toEqual([]);
				const back = match(other, one).map((pair) => pair.split(' → ').reverse().join(' → '));
				expect(back.sort()).toEqual(match(one, other).sort());
			})
		);
	});

	it('takes 20,000 operators that are all alike, or all different', () => {
		const wide = (relation: (index: number) => string): Sketch => ({
			kind: 'append',
			children: Array.from({ length: 19_999 }, (_each, index) => scan(relation(index)))
		});
		expect(matchOperators(draw(wide(() => 'a')), draw(wide(() => 'a')))).toHaveLength(20_000);
		const different = matchOperators(draw(wide((index) => `a${index}`)), draw(wide((index) => `b${index}`)));
		expect(different).toHaveLength(39_999);
	});
});

describe('orderCondition', () => {
	it('does not mind brackets, sides and order', () => {
		expect(orderCondition('((a.x = b.x) AND (b.y = c.y))')).toBe(
			orderCondition('((c.y = b.y) AND (b.x = a.x))')
		);
		expect(orderCondition('(a.x = b.x)')).not.toBe(orderCondition('(a.x = b.y)'));
	});
});

describe('chooseReadings', () => {
	it('finds no pair where one side is empty, and no plans where one side holds none', async () => {
		const text = await readOne('neither plan nor log');
		expect(chooseReadings([], [text])).toBeNull();
		expect(choosePlans([text], [text])).toBeNull();
		expect(chooseReadings([text], [text])).toEqual({ before: text, after: text });
	});

	it('prefers two plans of one statement to the heaviest ones', async () => {
		const plain = await readOne('Seq Scan on invoice  (cost=0.00..1.00 rows=1 width=4)');
		const of = (print: string, weight: number) => ({
			...plain,
			name: `${print} ${weight}`,
			statement: { fingerprint: print, text: 'SELECT ?' },
			symptoms: plain.symptoms.map((symptom) => ({ ...symptom, weight }))
		});
		const pair = choosePlans([of('a', 0.9), of('b', 0.5)], [of('c', 0.9), of('b', 0.1)]);
		expect([pair?.before.name, pair?.after.name]).toEqual(['b 0.5', 'b 0.1']);
	});
});
