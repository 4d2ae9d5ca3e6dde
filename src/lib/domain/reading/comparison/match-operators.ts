import type { Operator } from '../operator';
import { placeOperators, type PlacedOperator } from './operator-meaning';

/** An operator of the plan before and its like in the plan after; one of them is null where there is none. */
export interface OperatorPair {
	before: PlacedOperator | null;
	after: PlacedOperator | null;
}

/** What makes two operators the same in one round of matching; null: it does not take part. */
type KeyOf = (placed: PlacedOperator) => string | null;

/** From the strictest likeness to the loosest: each round pairs what the ones before it left over. */
const ROUNDS: readonly KeyOf[] = [
	({ operator, identity, reads }) => `${operator.kind} ${identity} ${reads} ${operator.condition ?? ''}`,
	({ job, identity, reads }) => `${job} ${identity} ${reads}`,
	// Joined in another order, over other tables: the condition still says which join it is.
	({ job, identity }) => (identity === '' ? null : `${job} ${identity}`),
	({ job, operator }) => (operator.relation === null ? null : `${job} ${operator.relation.toLowerCase()}`),
	// A rewritten statement calls the same columns of another name's.
	({ job, identity, operator }) =>
		identity === '' || operator.relation !== null ? null : `${job} ${withoutQualifiers(identity)}`,
	// Another condition or none, over the same tables: a nested loop names no condition of its own.
	({ job, reads, operator }) => (operator.relation === null ? `${job} ${reads}` : null)
];

/** "d.region, e.kind" → "region, kind" */
function withoutQualifiers(identity: string): string {
	return identity.replaceAll(/[\w$"]+\./g, '');
}

function append(groups: Map<string, PlacedOperator[]>, key: string, placed: PlacedOperator): void {
	const group = groups.get(key);
	if (group === undefined) groups.set(key, [placed]);
	else group.push(placed);
}

/** The two plans with who has been paired; linear in the number of operators. */
class Matching {
	readonly before: PlacedOperator[];
	readonly after: PlacedOperator[];
	readonly partnerOf = new Map<PlacedOperator, PlacedOperator>();

	constructor(before: Operator, after: Operator) {
		this.before = placeOperators(before);
		this.after = placeOperators(after);
	}

	pair(before: PlacedOperator, after: PlacedOperator): void {
		this.partnerOf.set(before, after);
		this.partnerOf.set(after, before);
	}

	isFree(placed: PlacedOperator): boolean {
		return !this.partnerOf.has(placed);
	}

	/** The operators without a partner, by key. A hash table goes with its join, never by its tables. */
	group(side: readonly PlacedOperator[], keyOf: KeyOf): Map<string, PlacedOperator[]> {
		const groups = new Map<string, PlacedOperator[]>();
		for (const placed of side) {
			if (!this.isFree(placed) || placed.operator.kind === 'hash-build') continue;
			const key = keyOf(placed);
			if (key === null) continue;
			append(groups, key, placed);
		}
		return groups;
	}

	/** Pairs two groups of equals: those at the same place first, the others in the order of the plan. */
	pairInOrder(before: readonly PlacedOperator[], after: readonly PlacedOperator[]): void {
		const free = after.filter((placed) => this.isFree(placed));
		const byPath = new Map(free.map((placed) => [placed.operator.path, placed]));
		for (const placed of before) {
			const same = byPath.get(placed.operator.path);
			if (same !== undefined && this.isFree(placed)) this.pair(placed, same);
		}
		const left = free.filter((placed) => this.isFree(placed));
		for (const [index, placed] of before.filter((one) => this.isFree(one)).entries()) {
			const partner = left[index];
			if (partner !== undefined) this.pair(placed, partner);
		}
	}

	matchBy(keyOf: KeyOf): void {
		const after = this.group(this.after, keyOf);
		for (const [key, group] of this.group(this.before, keyOf)) this.pairInOrder(group, after.get(key) ?? []);
	}

	/** Inputs of paired operators that do the same job are paired; a table is only ever paired with itself. */
	matchBelowPairs(): void {
		const below = this.childrenLeft(this.after);
		for (const [parent, children] of this.childrenLeft(this.before)) {
			const partner = this.partnerOf.get(parent);
			const others = partner === undefined ? undefined : below.get(partner);
			if (others === undefined) continue;
			for (const [job, group] of children) this.pairInOrder(group, others.get(job) ?? []);
		}
	}

	/** By parent and job: the inputs without a partner. */
	childrenLeft(side: readonly PlacedOperator[]): Map<PlacedOperator, Map<string, PlacedOperator[]>> {
		const children = new Map<PlacedOperator, Map<string, PlacedOperator[]>>();
		for (const placed of side) {
			if (placed.parent === null || placed.operator.relation !== null || !this.isFree(placed)) continue;
			const jobs = children.get(placed.parent) ?? new Map<string, PlacedOperator[]>();
			children.set(placed.parent, jobs);
			append(jobs, placed.job, placed);
		}
		return children;
	}

	/** The only one left of its job on either side, where one of them does not say what it does. */
	matchLast(): void {
		const keyOf: KeyOf = ({ job, operator }) => (operator.relation === null ? job : null);
		const after = this.group(this.after, keyOf);
		for (const [job, [only, more]] of this.group(this.before, keyOf)) {
			const [other, others] = after.get(job) ?? [];
			if (only === undefined || other === undefined || more !== undefined || others !== undefined) continue;
			// Two that say of themselves what they do, and say different things over different tables, are two.
			if (only.identity === '' || other.identity === '') this.pair(only, other);
		}
	}
}

/**
 * Pairs the operators of two plans by what they mean: the table they read, the condition they join on, the
 * keys they sort or group by, the tables below them; the path decides only between equals. So a join keeps its partner
 * when its sides are swapped, it comes earlier, or it is done in another way. Operators before in the order of the plan,
 * then those that are new.
 */
export function matchOperators(before: Operator, after: Operator): OperatorPair[] {
	const matching = new Matching(before, after);
	for (const keyOf of ROUNDS) matching.matchBy(keyOf);
	matching.matchBelowPairs();
	matching.matchLast();
	// A join that was paired last brings its hash table along.
	matching.matchBelowPairs();
	return [
		...matching.before.map((placed) => ({ before: placed, after: matching.partnerOf.get(placed) ?? null })),
		...matching.after
			.filter((placed) => matching.isFree(placed))
			.map((placed) => ({ before: null, after: placed }))
	];
}
