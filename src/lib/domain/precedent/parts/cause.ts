import { causeFeature } from '../features';
import type { CauseId } from '../../symptom/symptom';
import type { PrecedentProfile, Rarity } from '../precedent';
import {
	CAUSE_RARITY,
	CAUSE_SHARPNESS,
	DOUBT_AFTER_CONFIRMATION,
	GROUNDS_COUNT,
	REMEDY_COUNTS,
	TOLD_BESIDE_EVIDENCE,
	TOLD_CAUSE_COUNTS,
	TOLD_CAUSES_KEEP
} from '../weights';

/**
 * How far another incident shares the likely causes of the one asked about, 0..1: the cosine of what is
 * believed of each, a cause's weight being belief times rarity. (A cosine, where symptoms have a Jaccard index:
 * causes compete, so that it matters which one leads, not how many were considered.) A cause that a person
 * confirmed counts as certain; of an incident without evidence only the words speak, and count less. Null:
 * there is no cause to compare.
 */
export function compareCauses(
	asked: PrecedentProfile,
	other: PrecedentProfile,
	rarity: Rarity
): number | null {
	const likeness = cosine(beliefs(asked, rarity), beliefs(other, rarity));
	if (likeness === null) return null;
	const isToldOnly = other.causes.length === 0 && other.confirmedCause === null;
	return isToldOnly ? likeness * TOLD_CAUSES_KEEP : likeness;
}

/** Null: both are empty. */
function cosine(one: ReadonlyMap<string, number>, other: ReadonlyMap<string, number>): number | null {
	if (one.size + other.size === 0) return null;
	let product = 0;
	for (const [key, weight] of one) product += weight * (other.get(key) ?? 0);
	const lengths = Math.hypot(...one.values()) * Math.hypot(...other.values());
	return lengths > 0 ? Math.min(1, product / lengths) : 0;
}

/**
 * What is believed of each cause, and of each cause on the ground of each symptom: memory that a hash outgrew
 * and memory that a sort outgrew are the same cause by half.
 */
function beliefs(profile: PrecedentProfile, rarity: Rarity): Map<string, number> {
	const certain = profile.confirmedCause;
	const held = new Map<string, number>();
	const add = (key: string, id: CauseId, belief: number) => {
		const doubted = certain === null || id === certain ? belief : belief * DOUBT_AFTER_CONFIRMATION;
		held.set(key, (held.get(key) ?? 0) + doubted * rarity(causeFeature(id)) ** CAUSE_RARITY);
	};
	for (const { id, confidence, because } of profile.causes) {
		const belief = id === certain ? 1 : confidence ** CAUSE_SHARPNESS;
		add(id, id, belief);
		for (const symptom of because)
			add(`${id} ${symptom}`, id, (belief * GROUNDS_COUNT) / Math.sqrt(because.length));
	}
	const hasGiven = profile.causes.length > 0;
	for (const { id, isRemedied } of profile.toldCauses) {
		add(id, id, hasGiven ? TOLD_BESIDE_EVIDENCE : isRemedied ? REMEDY_COUNTS : TOLD_CAUSE_COUNTS);
	}
	if (certain !== null && !profile.causes.some((cause) => cause.id === certain)) add(certain, certain, 1);
	return held;
}
