import type { Caution } from '$lib/domain/caution/caution';
import { readBody } from '$lib/domain/runbook/parse-runbook';
import { highestLevel, type WeighedStep } from '$lib/domain/runbook/publish-gate';
import { workStateOf, type Standing } from '$lib/domain/runbook/review';
import type { Runbook, RunbookSummary, StepKind } from '$lib/domain/runbook/runbook';
import { render } from '../markdown/render';
import type { StoredRunbook } from './runbook-store';
import { weighRunbook } from './weigh-runbook';

/** A step as its page draws it: Markdown rendered and sanitised, each statement with its caution. */
export interface StepPage {
	number: number;
	title: string;
	kind: StepKind;
	html: string;
	/** A curator's caution; null: none. */
	cautionHtml: string | null;
	statements: Caution[];
}

/** The steps of a stored text with what their statements do. */
export function weigh(stored: StoredRunbook) {
	// The folder's database may change under tests and restores: the text itself belongs to the key.
	return weighRunbook(`${stored.slug} ${stored.revision} ${stored.engines.join()} ${stored.body}`, stored);
}

function common(stored: StoredRunbook): Omit<RunbookSummary, 'level' | 'draft'> {
	const { slug, title, summary, engines, symptoms, reviewEveryDays, state, revision } = stored;
	const { owner, reviewer, reviewDue, record } = stored;
	return {
		...{ slug, title, summary, engines, symptoms, reviewEveryDays, state, revision },
		...{ owner, reviewer, reviewDue, record }
	};
}

function draftOf({ draftState, newestRevision }: StoredRunbook): RunbookSummary['draft'] {
	return draftState === null ? null : { revision: newestRevision, state: draftState };
}

/** What a list shows of a runbook. */
export async function toSummary(stored: StoredRunbook): Promise<RunbookSummary> {
	return { ...common(stored), level: highestLevel(await weigh(stored)), draft: draftOf(stored) };
}

/** The whole runbook with the caution of every statement (API: Runbook). */
export async function toRunbook(stored: StoredRunbook): Promise<Runbook> {
	const steps = await weigh(stored);
	return {
		...common(stored),
		body: stored.body,
		steps: steps.map(({ step: { number, title, kind }, cautions }) => ({
			number,
			title,
			kind,
			statements: [...cautions]
		}))
	};
}

/** The whole runbook with its newest text, in that text's own state: what whoever writes or reviews it works on. */
export function toWork(stored: StoredRunbook): Promise<Runbook> {
	return toRunbook({ ...stored, state: workStateOf(standingOf(stored)) });
}

/** Where a stored runbook stands. */
export function standingOf({ state, draftState }: StoredRunbook): Standing {
	return { state, draft: draftState };
}

/** A text as its page draws it, rendered and sanitised. */
export interface DrawnText {
	introductionHtml: string;
	steps: StepPage[];
	remarksHtml: string;
}

/** What its page shows besides: the text before and after the steps, and the steps rendered. */
export async function toPage(stored: StoredRunbook): Promise<DrawnText> {
	return drawText(stored.body, await weigh(stored));
}

/** A text with its weighed steps, rendered. */
export function drawText(body: string, steps: readonly WeighedStep[]): DrawnText {
	const { introduction, remarks } = readBody(body);
	return {
		introductionHtml: render(introduction, { topHeading: 2 }),
		steps: steps.map(({ step, cautions }) => ({
			number: step.number,
			title: step.title,
			kind: step.kind,
			html: render(step.body, { topHeading: 4 }),
			cautionHtml: step.caution === null ? null : render(step.caution, { topHeading: 4 }),
			statements: [...cautions]
		})),
		remarksHtml: remarks === '' ? '' : render(remarks, { topHeading: 3 })
	};
}
