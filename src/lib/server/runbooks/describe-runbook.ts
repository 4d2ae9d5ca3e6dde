import type { Caution } from '$lib/domain/caution/caution';
import { readBody } from '$lib/domain/runbook/parse-runbook';
import { highestLevel } from '$lib/domain/runbook/publish-gate';
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

function weigh(stored: StoredRunbook) {
	// The folder's database may change under tests and restores: the text itself belongs to the key.
	return weighRunbook(`${stored.slug} ${stored.revision} ${stored.engines.join()} ${stored.body}`, stored);
}

function common(stored: StoredRunbook): Omit<RunbookSummary, 'level'> {
	const { id: _id, body: _body, ...summary } = stored;
	return summary;
}

/** What a list shows of a runbook. */
export async function toSummary(stored: StoredRunbook): Promise<RunbookSummary> {
	return { ...common(stored), level: highestLevel(await weigh(stored)) };
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

/** What its page shows besides: the text before and after the steps, and the steps rendered. */
export async function toPage(
	stored: StoredRunbook
): Promise<{ introductionHtml: string; steps: StepPage[]; remarksHtml: string }> {
	const { introduction, remarks } = readBody(stored.body);
	const steps = await weigh(stored);
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
