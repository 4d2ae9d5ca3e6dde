import { diffLines, diffWordsWithSpace, type Change } from 'diff';
import type { CautionLevel } from '../caution/caution';
import type { WeighedStep } from './publish-gate';
import type { RunbookInput } from './runbook-input';

/** A piece of a text that two revisions share, or that one of them has. */
export interface TextPart {
	text: string;
	change: 'same' | 'added' | 'removed';
}

/** A statement whose caution differs between two revisions; null: it does not stand there. */
export interface CautionChange {
	/** Of the later revision; of the earlier one where the statement is gone. */
	step: number;
	title: string;
	before: { sql: string; level: CautionLevel } | null;
	after: { sql: string; level: CautionLevel } | null;
}

/** A field beside the text that differs. */
export interface FieldChange {
	field: 'title' | 'summary' | 'engines' | 'symptoms' | 'reviewEveryDays';
	parts: TextPart[];
}

export interface RunbookComparison {
	slug: string;
	from: number;
	to: number;
	/** Changed levels first, the one raised most at the top; then statements that are new, then those that are gone. */
	cautions: CautionChange[];
	fields: FieldChange[];
	body: TextPart[];
}

/** One side of a comparison. */
export interface ComparedRevision {
	revision: number;
	input: RunbookInput;
	steps: readonly WeighedStep[];
}

/** Words that may differ before the comparison goes by lines: beyond it, both cost and result lose their sense. */
const MOST_WORD_EDITS = 3000;
/** Lines that may differ before the texts are shown as a whole. */
const MOST_LINE_EDITS = 5000;

/** Compares two texts by word; where too many differ by line, and at the worst as a whole. */
export function compareTexts(before: string, after: string): TextPart[] {
	const changes: Change[] | undefined =
		diffWordsWithSpace(before, after, { maxEditLength: MOST_WORD_EDITS }) ??
		diffLines(before, after, { maxEditLength: MOST_LINE_EDITS });
	if (changes === undefined)
		return [
			{ text: before, change: 'removed' },
			{ text: after, change: 'added' }
		];
	return changes.map(({ value, added, removed }) => ({
		text: value,
		change: added ? 'added' : removed ? 'removed' : 'same'
	}));
}

/** What is different between two revisions of one runbook. */
export function compareRevisions(
	slug: string,
	before: ComparedRevision,
	after: ComparedRevision
): RunbookComparison {
	return {
		slug,
		from: before.revision,
		to: after.revision,
		cautions: compareCautions(before.steps, after.steps),
		fields: compareFields(before.input, after.input),
		body: compareTexts(before.input.body, after.input.body)
	};
}

function compareFields(before: RunbookInput, after: RunbookInput): FieldChange[] {
	const write = (input: RunbookInput) => ({
		title: input.title,
		summary: input.summary,
		engines: input.engines.join(', '),
		symptoms: input.symptoms.join(', '),
		reviewEveryDays: `every ${input.reviewEveryDays} days`
	});
	const [one, other] = [write(before), write(after)];
	const fields: FieldChange['field'][] = ['title', 'summary', 'engines', 'symptoms', 'reviewEveryDays'];
	return fields
		.filter((field) => one[field] !== other[field])
		.map((field) => ({ field, parts: compareTexts(one[field], other[field]) }));
}

/** A statement in its place. */
interface Placed {
	step: number;
	title: string;
	sql: string;
	level: CautionLevel;
	/** Its place in the step: what pairs a statement that was rewritten. */
	place: string;
}

function listStatements(steps: readonly WeighedStep[]): Placed[] {
	return steps.flatMap(({ step, cautions }) =>
		cautions.map(({ sql, level }, index) => ({
			step: step.number,
			title: step.title,
			sql,
			level,
			place: `${step.title.toLowerCase()} ${index}`
		}))
	);
}

/** Takes the first that fits out of a list. */
function takeFirst(list: Placed[], fits: (one: Placed) => boolean): Placed | null {
	const index = list.findIndex(fits);
	return index < 0 ? null : (list.splice(index, 1)[0] ?? null);
}

/** Pairs statements: the same text first, then the same place under the same step. */
function pairStatements(before: Placed[], after: Placed[]): [Placed | null, Placed | null][] {
	const gone = [...before];
	const same = after.map((one) => [takeFirst(gone, ({ sql }) => sql === one.sql), one] as const);
	const pairs = same.map(([was, one]): [Placed | null, Placed | null] => [
		was ?? takeFirst(gone, ({ place }) => place === one.place),
		one
	]);
	return [...pairs, ...gone.map((one): [Placed, null] => [one, null])];
}

function compareCautions(before: readonly WeighedStep[], after: readonly WeighedStep[]): CautionChange[] {
	const show = (one: Placed | null) => (one === null ? null : { sql: one.sql, level: one.level });
	const changes = pairStatements(listStatements(before), listStatements(after)).flatMap(
		([was, is]): CautionChange[] => {
			const named = is ?? was;
			if (named === null || was?.level === is?.level) return [];
			return [{ step: named.step, title: named.title, before: show(was), after: show(is) }];
		}
	);
	return changes.sort((a, b) => rankOf(a) - rankOf(b) || riseOf(b) - riseOf(a));
}

function rankOf({ before, after }: CautionChange): number {
	if (before !== null && after !== null) return 0;
	return after !== null ? 1 : 2;
}

function riseOf({ before, after }: CautionChange): number {
	return (after?.level ?? 0) - (before?.level ?? 0);
}
