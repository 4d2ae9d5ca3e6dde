import type { Attempt } from '$lib/domain/incident/attempt';
import type { NamedComparison } from '$lib/domain/reading/compare-readings';

/** What the forms of an attempt need of it. */
export type EditedAttempt = Omit<Attempt, 'comparison'>;

/** An attempt as the page shows it. */
export interface DrawnAttempt extends EditedAttempt {
	noteHtml: string;
	/** With the changed operators alone: two plans may have thousands. */
	comparison: NamedComparison | null;
}

/** What the page knows of a step of an attempt under way. */
export interface StepFacts {
	title: string;
	/** Its statements are kept back until their caution and checks are ticked, which the checklist asks for. */
	isChecked: boolean;
}
