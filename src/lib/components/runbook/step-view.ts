import type { Caution, CautionLevel } from '$lib/domain/caution/caution';
import type { StepKind } from '$lib/domain/runbook/runbook';

/** A step as a page draws it: its Markdown rendered and sanitised, each statement with its caution. */
export interface StepView {
	number: number;
	title: string;
	kind: StepKind;
	html: string;
	/** A caution written by a curator; null: none. */
	cautionHtml: string | null;
	statements: Caution[];
}

/** What kind of step it is, as a reader needs it. */
export const KIND_WORDS: Record<StepKind, string> = {
	check: 'check',
	action: 'changes something',
	verify: 'verify',
	undo: 'way back',
	wait: 'wait'
};

/** The highest level of the statements; 0 where there are none. */
export function highestLevel(steps: readonly StepView[]): CautionLevel {
	return steps
		.flatMap((step) => step.statements.map((caution) => caution.level))
		.reduce<CautionLevel>((most, level) => (level > most ? level : most), 0);
}
