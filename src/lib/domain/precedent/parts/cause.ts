import { causeFeature } from '../features';
import { weightedJaccard } from '../jaccard';
import type { PrecedentProfile, Rarity } from '../precedent';
import { DOUBT_AFTER_CONFIRMATION } from '../weights';

/**
 * How far two incidents share their likely causes, 0..1: weighted Jaccard over confidence times rarity. A cause
 * that a person confirmed counts as certain, and what the rules had thought likely fades beside it. Null:
 * neither has any.
 */
export function compareCauses(one: PrecedentProfile, other: PrecedentProfile, rarity: Rarity): number | null {
	return weightedJaccard(beliefs(one, rarity), beliefs(other, rarity));
}

function beliefs(profile: PrecedentProfile, rarity: Rarity): Map<string, number> {
	const confirmed = profile.confirmedCause;
	const held = new Map<string, number>();
	for (const { id, confidence } of profile.causes) {
		held.set(
			id,
			(confirmed === null ? confidence : confidence * DOUBT_AFTER_CONFIRMATION) * rarity(causeFeature(id))
		);
	}
	if (confirmed !== null) held.set(confirmed, rarity(causeFeature(confirmed)));
	return held;
}
