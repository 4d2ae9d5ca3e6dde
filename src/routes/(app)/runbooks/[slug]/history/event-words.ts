import type { ReviewAction } from '$lib/domain/runbook/review';

/** What was done with a revision, as a word before "by …". */
export const EVENT_WORDS: Record<ReviewAction, string> = {
	submit: 'Submitted for review',
	return: 'Returned',
	approve: 'Approved',
	publish: 'Published',
	retire: 'Retired'
};

/** The events that say something about trust, for colour beside the word. */
export const EVENT_LOOKS: Record<ReviewAction, string> = {
	submit: 'text-iris',
	return: 'text-amber',
	approve: 'text-moss',
	publish: 'text-moss',
	retire: 'text-ink2'
};
