import { countOf } from '../symptom/figures';
import type { MisestimateAt } from '../symptom/misestimates';
import { findOverflow, type Overflow } from '../symptom/overflow';
import type { PlanTree } from '../symptom/plan-tree';
import { formatRows } from '../sizing/units';
import type { PlanOperator } from './operator';
import { phraseOperator } from './operator-phrase';
import type { Trail, TrailStep } from './reading';

/** An operator still carries an error from below while it is off by about half of a factor of ten (on the log scale). */
const LEAST_CARRIED_RATIO = Math.sqrt(10);
/** Up to here an operator counts as wrong itself, where nothing overflowed. */
const LEAST_WRONG_RATIO = 10;
/** More than a handful tell nothing new. */
const MOST_TRAILS = 8;
/** Of the many errors in a plan of thousands of operators the largest are followed. */
const MOST_FOLLOWED = 64;

const JOINS: readonly PlanOperator['kind'][] = ['hash-join', 'merge-join', 'nested-loop'];

interface Course {
	origin: MisestimateAt;
	/** From the origin upwards; the Hash below a hash join is left out, it repeats its input. */
	path: PlanOperator[];
	overflows: { operator: PlanOperator; overflow: Overflow }[];
	/** Whether the first overflow is a hash table that this trail fills. */
	fillsTable: boolean;
}

/**
 * The trails of a plan's misestimates: from where each begins, up through its parents, to the operators that overflowed
 * for it, or else to the highest operator that is still wrong. Those that overflow come first; of several that end at one
 * join, the one that fills its hash table.
 */
export function findTrails(tree: PlanTree, misestimates: readonly MisestimateAt[]): Trail[] {
	return misestimates
		.filter((each) => !each.grows)
		.sort((one, other) => other.q - one.q)
		.slice(0, MOST_FOLLOWED)
		.map((origin) => followUp(origin, tree))
		.sort(compareCourses)
		.slice(0, MOST_TRAILS)
		.map(toTrail);
}

function followUp(origin: MisestimateAt, tree: PlanTree): Course {
	const climb = climbFrom(origin.operator, tree);
	const overflows: Course['overflows'] = [];
	let fillsTable = false;
	let lastWrong = 0;
	for (const [index, operator] of climb.entries()) {
		if (operator.kind === 'hash-build') continue;
		const below = climb[index - 1] ?? operator;
		if (index > 0 && !carries(below, origin) && !carries(operator, origin)) break;
		const overflow = origin.direction === 'under' ? findOverflow(operator, tree) : null;
		if (overflow !== null) {
			if (overflows.length === 0) fillsTable = below.kind === 'hash-build';
			overflows.push({ operator, overflow });
			lastWrong = index;
		} else if (isOff(operator, origin, LEAST_WRONG_RATIO) && overflows.length === 0) lastWrong = index;
	}
	const last = overflows.at(-1)?.operator;
	const end = last === undefined ? lastWrong : climb.indexOf(last);
	const path = climb.slice(0, end + 1).filter((operator) => operator.kind !== 'hash-build');
	return { origin, path, overflows, fillsTable };
}

function climbFrom(operator: PlanOperator, tree: PlanTree): PlanOperator[] {
	const climb: PlanOperator[] = [];
	for (let next: PlanOperator | null = operator; next !== null; next = tree.parentOf(next)) climb.push(next);
	return climb;
}

function carries(operator: PlanOperator, origin: MisestimateAt): boolean {
	return isOff(operator, origin, LEAST_CARRIED_RATIO);
}

function isOff({ ratio }: PlanOperator, { direction }: MisestimateAt, factor: number): boolean {
	return ratio !== null && (direction === 'under' ? ratio >= factor : ratio <= 1 / factor);
}

function compareCourses(one: Course, other: Course): number {
	return (
		Number(other.overflows.length > 0) - Number(one.overflows.length > 0) ||
		bytesOf(other) - bytesOf(one) ||
		Number(other.fillsTable) - Number(one.fillsTable) ||
		other.origin.q - one.origin.q
	);
}

function bytesOf({ overflows }: Course): number {
	return overflows.reduce((sum, { overflow }) => sum + (overflow.bytes ?? 0), 0);
}

function toTrail(course: Course): Trail {
	return {
		sentence: sayTrail(course),
		steps: course.path.map(toStep),
		overflow: course.overflows[0]?.operator.path ?? null
	};
}

function toStep(operator: PlanOperator): TrailStep {
	const expected = operator.estimatedRows ?? 0;
	const actual = operator.actualRows ?? 0;
	return {
		operator: operator.path,
		expected,
		actual,
		ratio: operator.ratio ?? Math.max(actual, 1) / Math.max(expected, 1)
	};
}

/** "The estimate goes wrong at scan of invoice_line (expected 600, got 450,300), stays wrong through 1 join, and overflows at …" */
function sayTrail({ origin, path, overflows }: Course): string {
	const [start] = path;
	if (start === undefined) return '';
	const began = `The estimate goes wrong at ${phraseOperator(start)} (expected ${formatRows(start.estimatedRows ?? 0)}, got ${formatRows(start.actualRows ?? 0)})`;
	const [first, ...more] = overflows;
	const end = first?.operator ?? path.at(-1);
	const upTo = end === undefined ? 0 : path.indexOf(end);
	const joins = path.slice(1, upTo).filter((operator) => JOINS.includes(operator.kind)).length;
	const through = joins > 0 ? `, stays wrong through ${countOf(joins, 'join')},` : '';
	if (first === undefined) {
		if (end === undefined || end === start) return `${began}.`;
		return `${began}${through} and is still wrong at ${phraseOperator(end)} (expected ${formatRows(end.estimatedRows ?? 0)}, got ${formatRows(end.actualRows ?? 0)}).`;
	}
	const where = first.operator === origin.operator ? 'there' : `at ${phraseOperator(first.operator)}`;
	const again = more.map(
		({ operator, overflow }) => `, and again at ${phraseOperator(operator)}: ${overflow.words}`
	);
	return `${began}${through} and overflows ${where}: ${first.overflow.words}${again.join('')}.`;
}
