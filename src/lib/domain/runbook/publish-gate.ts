import type { Caution, CautionLevel } from '../caution/caution';
import { readBody } from './parse-runbook';
import type { Step } from './runbook';

/** A step with what its statements do. */
export interface WeighedStep {
	step: Step;
	cautions: readonly Caution[];
}

/** The highest level of a runbook's statements; 0 where it has none. */
export function highestLevel(steps: readonly WeighedStep[]): CautionLevel {
	return steps
		.flatMap(({ cautions }) => cautions.map(({ level }) => level))
		.reduce<CautionLevel>((a, b) => (b > a ? b : a), 0);
}

/**
 * Every reason why a runbook may not be published, as sentences; empty: it may. One whose step changes
 * production needs a caution for each statement, a check before, a verification after and a way back.
 */
export function reasonsAgainstPublishing(body: string, steps: readonly WeighedStep[]): string[] {
	const reasons = readBody(body).problems.map(({ message }) => message);
	const changing = steps.filter(
		({ step, cautions }) => step.kind === 'action' || cautions.some(({ level }) => level >= 2)
	);
	const [first] = changing;
	const last = changing.filter(({ step }) => step.kind !== 'undo').at(-1);
	for (const { step, cautions } of steps) {
		if (cautions.some(({ understood }) => !understood) && step.caution === null) {
			reasons.push(
				`Step ${step.number} has a statement that is not understood: a curator has to write its caution.`
			);
		}
	}
	if (first === undefined) return reasons;
	if (!steps.some(({ step }) => step.kind === 'check' && step.number < first.step.number)) {
		reasons.push(`Step ${first.step.number} changes production, and no check stands before it.`);
	}
	if (
		last !== undefined &&
		!steps.some(({ step }) => step.kind === 'verify' && step.number > last.step.number)
	) {
		reasons.push(`Step ${last.step.number} changes production, and no verification stands after it.`);
	}
	if (!steps.some(({ step }) => step.kind === 'undo'))
		reasons.push('It changes production, and there is no way back: add an undo step.');
	return reasons;
}
