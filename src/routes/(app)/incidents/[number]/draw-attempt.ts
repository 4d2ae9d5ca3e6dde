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
