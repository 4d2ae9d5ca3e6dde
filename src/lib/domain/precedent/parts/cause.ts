import { causeFeature } from '../features';
import { weightedJaccard } from '../jaccard';
import type { PrecedentProfile, Rarity } from '../precedent';
import { DOUBT_AFTER_CONFIRMATION, TOLD_CAUSE_COUNTS } from '../weights';

/**
 * How far two incidents share their likely causes, 0..1: weighted Jaccard over confidence times rarity. A cause
 * that a person confirmed counts as certain, and what the rules had thought likely fades beside it; one that
 * the text names (or the remedy of) is believed a little, and more where the evidence says so too. Null:
 * neither has any.
 */
export function compareCauses(one: PrecedentProfile, other: PrecedentProfile, rarity: Rarity): number | null {
	return weightedJaccard(beliefs(one, rarity), beliefs(other, rarity));
}

function beliefs(profile: PrecedentProfile, rarity: Rarity): Map<string, number> {
	const held = new Map<string, number>();
	for (const { id, confidence } of profile.causes) held.set(id, confidence);
	for (const id of profile.toldCauses)
		held.set(id, Math.max(held.get(id) ?? 0, 0) * (1 - TOLD_CAUSE_COUNTS) + TOLD_CAUSE_COUNTS);
	const confirmed = profile.confirmedCause;
	if (confirmed !== null) {
		for (const [id, belief] of held) held.set(id, belief * DOUBT_AFTER_CONFIRMATION);
		held.set(confirmed, 1);
	}
	for (const [id, belief] of held) held.set(id, belief * rarity(causeFeature(id)));
	return held;
}
