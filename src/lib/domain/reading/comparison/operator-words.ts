import { walkOperators, type Operator, type OperatorKind } from '../operator';
import { phraseOperator } from '../operator-phrase';

/** How a table is read, for "is read through … instead of …". */
const ACCESS: Partial<Record<OperatorKind, string>> = {
	'seq-scan': 'from end to end',
	'index-scan': 'through an index',
	'index-only-scan': 'from an index alone',
	'bitmap-scan': 'by a bitmap of an index'
};

/** How a table is read: "through an index"; null: the operator reads none. */
export function sayAccess({ kind }: Operator): string | null {
	return ACCESS[kind] ?? null;
}

/** "nested loop", "hash join": a kind as words. */
export function sayKind({ kind, name }: Operator): string {
	return kind === 'other' ? name.toLowerCase() : kind.replaceAll('-', ' ');
}

/** The side of a hash join that fills its hash table; null: the operator is none, or shows none. */
export function buildSideOf(operator: Operator): Operator | null {
	if (operator.kind !== 'hash-join') return null;
	return operator.children.find(({ kind }) => kind === 'hash-build') ?? operator.children[1] ?? null;
}

/** Tables named before the rest is counted. */
const MOST_TABLES = 2;

/** The tables that an operator reads, itself and below: "invoice", "invoice and port_call", "invoice, port_call and 2 more". */
export function sayTables(operator: Operator): string {
	const tables = new Set<string>();
	for (const { relation } of walkOperators(operator)) if (relation !== null) tables.add(relation);
	const named = [...tables].slice(0, MOST_TABLES);
	const more = tables.size - named.length;
	if (more > 0) return `${named.join(', ')} and ${more} more`;
	return named.length > 0 ? named.join(' and ') : phraseOperator(operator);
}

/**
 * Names operators of a plan for its sentences: "the sort" where there is one, "the sort by currency" where
 * there are several.
 */
export function nameIn(root: Operator): (operator: Operator) => string {
	// Counted at the first name that is asked for: most sentences name nothing.
	let counts: Map<string, number> | null = null;
	return (operator) => {
		counts ??= countKinds(root);
		const kind = sayKind(operator);
		const isOnly = counts.get(kind) === 1 && operator.relation === null;
		return `the ${isOnly ? kind : phraseOperator(operator)}`;
	};
}

function countKinds(root: Operator): Map<string, number> {
	const counts = new Map<string, number>();
	for (const operator of walkOperators(root)) {
		const kind = sayKind(operator);
		counts.set(kind, (counts.get(kind) ?? 0) + 1);
	}
	return counts;
}
