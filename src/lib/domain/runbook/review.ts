import type { RunbookState } from './runbook';

/** What a person may do with a runbook's state (API: POST /runbooks/{slug}/review, /publish, /retire). */
export const REVIEW_ACTIONS = ['submit', 'return', 'approve', 'publish', 'retire'] as const;
export type ReviewAction = (typeof REVIEW_ACTIONS)[number];

/** How far a text is that is not published yet. */
export type DraftState = 'draft' | 'in-review';

/** Where a runbook stands: what readers see, and a newer text that is under way beside it. */
export interface Standing {
	state: RunbookState;
	/** A newer text than the published one; null: there is none. */
	draft: DraftState | null;
}

/** The state of the newest text. */
export function workStateOf({ state, draft }: Standing): RunbookState {
	return draft ?? state;
}

/** Standing with another state of the newest text; what is published beside it stays. */
function moveDraft(standing: Standing, to: DraftState): Standing {
	return standing.state === 'published' ? { state: 'published', draft: to } : { state: to, draft: null };
}

/**
 * Where a runbook stands after an action; null: the state does not allow it. Approving moves nothing: it is said
 * of a text in review, or of a published one that was read again. Retiring drops a newer draft (its text stays
 * in the history).
 */
export function standingAfter(standing: Standing, action: ReviewAction): Standing | null {
	const work = workStateOf(standing);
	switch (action) {
		case 'submit':
			return work === 'draft' ? moveDraft(standing, 'in-review') : null;
		case 'return':
			return work === 'in-review' ? moveDraft(standing, 'draft') : null;
		case 'approve':
			return work === 'in-review' || work === 'published' ? standing : null;
		case 'publish':
			return work === 'in-review' ? { state: 'published', draft: null } : null;
		case 'retire':
			return standing.state === 'published' ? { state: 'retired', draft: null } : null;
	}
}

/** Where a runbook stands after its text was changed: what was published stays so until the new text is. */
export function standingAfterEdit(standing: Standing): Standing {
	return moveDraft(standing, 'draft');
}

const ONLY: Record<ReviewAction, string> = {
	submit: 'only a draft is submitted',
	return: 'only a text in review is returned',
	approve: 'only a text in review, or a published one that was read again, is approved',
	publish: 'submit it for review first',
	retire: 'only a published one is retired'
};

/** Why the state does not allow an action, as a sentence. */
export function sayWhyNot(standing: Standing, action: ReviewAction): string {
	const work = workStateOf(standing);
	if (action === 'publish' && work === 'published')
		return 'It is published already, and there is no newer text.';
	return `It is ${work === 'draft' ? 'a draft' : work.replace('-', ' ')}: ${ONLY[action]}.`;
}

const DAY_MS = 86_400_000;

/** When a runbook that was read at `readAt` is to be read again (ISO 8601 in UTC). */
export function nextReview(readAt: string, reviewEveryDays: number): string {
	return new Date(Date.parse(readAt) + reviewEveryDays * DAY_MS).toISOString();
}
