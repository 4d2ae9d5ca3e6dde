import { readFrontMatter } from '../markdown/front-matter';
import { readSteps, type BodyParts } from '../markdown/steps';
import type { FieldIssue } from '../problem';
import type { Step } from './runbook';
import { runbookFrontMatter, type RunbookInput } from './runbook-input';

/** A runbook's file as far as it could be read. */
export interface ParsedRunbook {
	/** null: the front matter does not fit, see problems. */
	input: RunbookInput | null;
	/** E-mail of the person who looks after it; null where the file names nobody. */
	owner: string | null;
	steps: Step[];
	problems: FieldIssue[];
}

/** Reads a runbook's file: YAML front matter, then the body with its steps. Every problem is listed, none thrown. */
export function parseRunbook(markdown: string): ParsedRunbook {
	const split = readFrontMatter(markdown);
	if (!split.ok) {
		return {
			input: null,
			owner: null,
			steps: [],
			problems: [{ field: 'front matter', message: split.problem.detail }]
		};
	}
	const { data, body } = split.value;
	const { steps, problems } = readBody(body);
	const fields = runbookFrontMatter.safeParse(data ?? {});
	if (!fields.success) {
		const issues = fields.error.issues.map((issue) => ({
			field: issue.path.join('.') || 'front matter',
			message: issue.message
		}));
		return { input: null, owner: null, steps, problems: [...issues, ...problems] };
	}
	const { owner, ...input } = fields.data;
	return { input: { ...input, body }, owner: owner ?? null, steps, problems };
}

/** The section that every runbook has: the vendor's documentation and the team's change control come first. */
export const PRODUCTION_SECTION = 'Before you use this on production';

/** Takes a runbook's body apart; a missing section on production is a problem like any other. */
export function readBody(body: string): BodyParts {
	const parts = readSteps(body);
	if (!new RegExp(`^#+\\s+${PRODUCTION_SECTION}\\s*$`, 'm').test(parts.introduction)) {
		parts.problems.push({
			field: 'body',
			message: `The section "## ${PRODUCTION_SECTION}" is missing before the first step.`
		});
	}
	return parts;
}
