import type { Operator } from '../operator';
import { listWords, type Compared, type ComparedPair } from './compared';
import { followEstimate, sayEstimate } from './estimates';
import { hasChangedSides } from './operator-changes';
import { buildSideOf, nameIn, sayAccess, sayKind, sayTables } from './operator-words';

/** More clauses than that are for the table below the sentence. */
const MOST_CLAUSES = 4;

/** What is different in the plan and what got better, as clauses of one sentence; empty: nothing. */
export function sayBetter(compared: Compared): string[] {
	const estimate = sayEstimates(compared.pairs);
	const cured = sayCured(compared);
	const left = MOST_CLAUSES - estimate.length - cured.length;
	return [...estimate, ...sayShape(compared).slice(0, left), ...cured];
}

/** The estimate that was furthest off where the misestimate began: above it others were wrong only for its sake. */
function sayEstimates(pairs: readonly ComparedPair[]): string[] {
	const mended = pairs
		.flatMap((pair) => {
			const course = followEstimate(pair);
			return pair.after !== null && (course === 'right' || course === 'nearer')
				? [{ is: pair.after.operator, isRight: course === 'right', depth: depthOf(pair.before?.operator) }]
				: [];
		})
		.toSorted((one, other) => Number(other.isRight) - Number(one.isRight) || other.depth - one.depth);
	return mended
		.slice(0, 1)
		.map(({ is, isRight }) => `the estimate is ${isRight ? 'right now' : 'nearer'} (${sayEstimate(is)})`);
}

/** A misestimate begins at the bottom of a plan. */
function depthOf(operator: Operator | undefined): number {
	return operator === undefined ? 0 : operator.path.split('.').length;
}

const FOLLOWS = 2;

/** A clause and how much it tells: a join's sides and method before a table's access, that before anything else. */
interface Weighed {
	clause: string;
	rank: number;
}

function sayShape({ before, after, pairs }: Compared): string[] {
	if (before.plan === null || after.plan === null) return [];
	const name = nameIn(after.plan.root);
	const clauses = pairs
		.flatMap((pair) => sayMethod(pair, name) ?? [])
		.toSorted((one, other) => one.rank - other.rank);
	// Another way of grouping follows from what the joins below it do, and is told only for want of that.
	const telling = clauses.filter(({ rank }) => rank < FOLLOWS);
	return [...new Set((telling.length > 0 ? telling : clauses).map(({ clause }) => clause))];
}

function sayMethod(pair: ComparedPair, name: (operator: Operator) => string): Weighed | null {
	if (pair.before === null || pair.after === null) return null;
	const [was, is] = [pair.before.operator, pair.after.operator];
	const [wasSide, isSide] = [buildSideOf(was), buildSideOf(is)];
	if (wasSide !== null && isSide !== null && hasChangedSides(was, is))
		return {
			clause: `${name(is).replace(/^the hash join$/, 'the join')} builds on ${sayTables(isSide)} instead of ${sayTables(wasSide)}`,
			rank: 0
		};
	if (was.kind === is.kind) return null;
	const [wasAccess, isAccess] = [sayAccess(was), sayAccess(is)];
	if (is.relation !== null)
		return wasAccess === null || isAccess === null || wasAccess === isAccess
			? null
			: { clause: `${is.relation} is read ${isAccess} instead of ${wasAccess}`, rank: 1 };
	const overflowed = replacesOverflow(pair) ? ' that overflowed' : '';
	return {
		clause: `a ${sayKind(is)} takes the place of the ${sayKind(was)}${overflowed}`,
		rank: pair.after.job === 'join' ? 0 : FOLLOWS
	};
}

/** Whether another kind of operator does now, in memory, what overflowed before. */
function replacesOverflow({ before, after, spilledBefore, spilledAfter }: ComparedPair): boolean {
	return (
		before !== null &&
		after !== null &&
		spilledBefore !== null &&
		spilledAfter === null &&
		before.operator.kind !== after.operator.kind
	);
}

function sayCured({ before, after, pairs }: Compared): string[] {
	if (before.plan === null || after.plan === null) return [];
	const [nameBefore, nameAfter] = [nameIn(before.plan.root), nameIn(after.plan.root)];
	const cured = new Set<string>();
	const gone = new Set<string>();
	for (const pair of pairs) {
		if (pair.spilledBefore === null || pair.spilledAfter !== null || pair.before === null) continue;
		if (pair.after === null) gone.add(nameBefore(pair.before.operator));
		else if (!replacesOverflow(pair)) cured.add(nameAfter(pair.after.operator));
	}
	return [
		...(cured.size === 0
			? []
			: [`${listWords([...cured])} no longer ${cured.size === 1 ? 'overflows' : 'overflow'}`]),
		...(gone.size === 0
			? []
			: [`${listWords([...gone])} that overflowed ${gone.size === 1 ? 'is' : 'are'} gone`])
	];
}
