import type { RunbookState } from './runbook';

/** What a person may do with a runbook's state (API: POST /runbooks/{slug}/review, /publish, /retire). */
export const REVIEW_ACTIONS = ['submit', 'return', 'publish', 'retire', 'reopen'] as const;
export type ReviewAction = (typeof REVIEW_ACTIONS)[number];

/** The moves that a state allows, and nothing else. */
export const REVIEW_MOVES: Record<RunbookState, Partial<Record<ReviewAction, RunbookState>>> = {
	draft: { submit: 'in-review' },
	'in-review': { return: 'draft', publish: 'published' },
	published: { retire: 'retired', reopen: 'draft' },
	retired: { reopen: 'draft' }
};

/** The state after an action; null: the state does not allow it. */
export function stateAfter(state: RunbookState, action: ReviewAction): RunbookState | null {
	return REVIEW_MOVES[state][action] ?? null;
}

const DAY_MS = 86_400_000;

/** When a runbook that was read at `readAt` is to be read again (ISO 8601 in UTC). */
export function nextReview(readAt: string, reviewEveryDays: number): string {
	return new Date(Date.parse(readAt) + reviewEveryDays * DAY_MS).toISOString();
}
