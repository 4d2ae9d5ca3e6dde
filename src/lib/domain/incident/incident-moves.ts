import { MOVES, type IncidentState } from './incident';

/** What a move from one state to another is judged by: the incident as it would be afterwards. */
export interface MoveFacts {
	from: IncidentState;
	to: IncidentState;
	cause: string | null;
	resolution: string | null;
	/** Why it came back; only asked for on the way back to open. */
	reason: string | null;
}

/** Whether a text says anything. */
function isSaid(text: string | null): boolean {
	return text !== null && text.trim() !== '';
}

/** Why an incident can't be called resolved yet; empty: nothing is missing. */
export function findMissingForResolved(facts: Pick<MoveFacts, 'cause' | 'resolution'>): string[] {
	const reasons: string[] = [];
	if (!isSaid(facts.cause)) reasons.push("Name the cause; 'not found' is an answer when nobody found it.");
	if (!isSaid(facts.resolution)) reasons.push('Say what ended it (resolution).');
	return reasons;
}

/** Every reason why a move is refused; empty: it is allowed. Staying where it is is not a move. */
export function findMoveRefusals(facts: MoveFacts): string[] {
	const { from, to } = facts;
	if (from === to) return [];
	const reasons: string[] = [];
	if (!MOVES[from].includes(to)) {
		const next = MOVES[from];
		const ways =
			next.length === 0
				? 'a reviewed incident is closed; log a new one if it came back'
				: `from there it can become ${next.join(' or ')}`;
		reasons.push(`The incident is ${from} and can't become ${to}: ${ways}.`);
	}
	if (to === 'resolved' || to === 'reviewed') reasons.push(...findMissingForResolved(facts));
	if (to === 'open' && MOVES[from].includes('open') && !isSaid(facts.reason))
		reasons.push('Say why it is open again (reason).');
	return reasons;
}
