import type { FieldIssue } from '../problem';
import { STEP_KINDS, type Step, type StepKind } from '../runbook/runbook';
import type { MarkdownLine } from './lines';
import { readOutline, type Section } from './outline';

/** A runbook's body taken apart. */
export interface BodyParts {
	/** Markdown before the first step: what the runbook is for, and what comes before production. */
	introduction: string;
	steps: Step[];
	/** Markdown after the last step, under a heading that is no step; empty where there is none. */
	remarks: string;
	problems: FieldIssue[];
}

/** `### 2. Build the new index (action)` */
const STEP_HEADING = /^(\d+)\.\s+(.+?)\s*\(([^()]+)\)$/;
const NUMBERED = /^\d+[.)]\s/;
const CAUTION = /^\s*>\s*(?:\*\*|__)?caution:?(?:\*\*|__)?:?\s*/i;

/**
 * Reads the steps out of a runbook's body. A step is a numbered heading with its kind in brackets; the fenced
 * `sql` blocks under it are its statements, a quotation that begins with "Caution:" is the curator's caution,
 * all else is its text. Problems name the line; steps that could be read are kept.
 */
export function readSteps(body: string): BodyParts {
	const parts: BodyParts = { introduction: '', steps: [], remarks: '', problems: [] };
	const introduction: string[] = [];
	const remarks: string[] = [];
	for (const section of readOutline(body)) {
		const found = STEP_HEADING.exec(section.title);
		if (found !== null) addStep(section, found, parts);
		else if (parts.steps.length === 0) introduction.push(writeSection(section));
		else if (section.level > 3) appendToStep(section, parts.steps);
		else remarks.push(writeSection(section));
		if (found === null && NUMBERED.test(section.title)) {
			parts.problems.push(
				issue(section.line, `a step's heading ends with its kind in brackets: ${STEP_KINDS.join(', ')}.`)
			);
		}
	}
	parts.introduction = introduction.join('\n\n').trim();
	parts.remarks = remarks.join('\n\n').trim();
	if (parts.steps.length === 0)
		parts.problems.push({
			field: 'body',
			message: 'There is no step yet: write "### 1. What to do (action)".'
		});
	return parts;
}

function addStep(section: Section, heading: RegExpExecArray, parts: BodyParts): void {
	const number = Number(heading[1]);
	const kind = STEP_KINDS.find((known) => known === heading[3]?.trim().toLowerCase());
	if (kind === undefined) {
		parts.problems.push(
			issue(section.line, `"${heading[3] ?? ''}" is no kind of step: ${STEP_KINDS.join(', ')}.`)
		);
	}
	if (number !== parts.steps.length + 1) {
		parts.problems.push(
			issue(section.line, `step ${number} stands where step ${parts.steps.length + 1} is expected.`)
		);
	}
	parts.steps.push(toStep(number, heading[2] ?? '', kind ?? 'action', section.lines));
}

function toStep(number: number, title: string, kind: StepKind, lines: readonly MarkdownLine[]): Step {
	const sql: string[] = [];
	const text: string[] = [];
	const caution: string[] = [];
	let statement: string[] = [];
	let inCaution = false;
	for (const line of lines) {
		if (line.fence === 'sql') {
			if (!line.isFence) statement.push(line.text);
			else if (statement.length > 0) {
				sql.push(statement.join('\n').trim());
				statement = [];
			}
			inCaution = false;
			continue;
		}
		if (line.fence === null && CAUTION.test(line.text)) inCaution = true;
		else if (!/^\s*>/.test(line.text)) inCaution = false;
		if (inCaution) caution.push(line.text.replace(CAUTION, '').replace(/^\s*>\s?/, ''));
		else text.push(line.text);
	}
	if (statement.length > 0) sql.push(statement.join('\n').trim());
	const said = caution.join('\n').trim();
	const body = text
		.join('\n')
		.replace(/\n{3,}/g, '\n\n')
		.trim();
	return {
		number,
		title,
		kind,
		body,
		sql: sql.filter((one) => one !== ''),
		caution: said === '' ? null : said
	};
}

/** A small heading inside a step stays in its text. */
function appendToStep(section: Section, steps: Step[]): void {
	const last = steps.at(-1);
	if (last === undefined) return;
	const more = toStep(last.number, '', last.kind, section.lines);
	last.body = [last.body, `${'#'.repeat(section.level)} ${section.title}`, more.body].join('\n\n').trim();
	last.sql.push(...more.sql);
	last.caution = [last.caution, more.caution].filter((text) => text !== null).join('\n\n') || null;
}

function writeSection(section: Section): string {
	const lines = section.lines.map(({ text }) => text).join('\n');
	return section.level === 0
		? lines.trim()
		: `${'#'.repeat(section.level)} ${section.title}\n\n${lines.trim()}`;
}

function issue(line: number, message: string): FieldIssue {
	return { field: 'body', message: `Line ${line}: ${message}` };
}
