import type { Verdict } from '../precedent';
import { VERDICT_RELATED, VERDICT_SAME } from '../weights';

/** What people said of this very pair, 0..1; null: nobody has. "Not this" is 0 and keeps it from the first place. */
export function compareByVerdict(verdict: Verdict | null): number | null {
	if (verdict === null) return null;
	return { same: VERDICT_SAME, related: VERDICT_RELATED, not: 0 }[verdict];
}
