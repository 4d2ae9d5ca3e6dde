import { symptomFeature } from '../features';
import type { ProfileSymptom, Rarity } from '../precedent';
import {
	COURSE_COUNTS,
	DECADE_COUNTS,
	HEAVINESS_COUNTS,
	LACK_COUNTS,
	PLACE_COUNTS,
	TOLD_COUNTS
} from '../weights';

/**
 * Weighted Jaccard over two incidents' symptoms, 0..1. A symptom's weight is its rarity, more where it does
 * harm; what both have counts fully only when its figures lie in the same decade, its spill took the same
 * course (planned or grown), and it shows at the same kind of operator. Null: neither has any.
 */
export function compareSymptoms(
	one: readonly ProfileSymptom[],
	other: readonly ProfileSymptom[],
	rarity: Rarity
): number | null {
	const matches = new Map(other.map((symptom) => [symptom.id, symptom]));
	let common = 0;
	let all = 0;
	for (const symptom of one) {
		const match = matches.get(symptom.id);
		matches.delete(symptom.id);
		const weight = weightOf(symptom, rarity);
		const matched = match === undefined ? 0 : weightOf(match, rarity);
		all += Math.max(weight, matched);
		if (match !== undefined) common += Math.min(weight, matched) * likenessOf(symptom, match);
	}
	for (const symptom of matches.values()) all += weightOf(symptom, rarity);
	return all > 0 ? common / all : null;
}

function weightOf(symptom: ProfileSymptom, rarity: Rarity): number {
	const heaviness = 1 - HEAVINESS_COUNTS * (1 - symptom.weight);
	const counts = symptom.told ? TOLD_COUNTS : symptom.id === 'no-runtime-figures' ? LACK_COUNTS : 1;
	return rarity(symptomFeature(symptom.id)) * heaviness * counts;
}

/** 1 where all that is known of both agrees; what one of them doesn't know takes nothing off. */
function likenessOf(one: ProfileSymptom, other: ProfileSymptom): number {
	let likeness = 1;
	if (one.course !== null && other.course !== null && one.course !== other.course) likeness -= COURSE_COUNTS;
	if (one.operator !== null && other.operator !== null && one.operator !== other.operator) {
		likeness -= PLACE_COUNTS;
	}
	if (one.magnitude !== null && other.magnitude !== null) {
		likeness -= DECADE_COUNTS * decadesApart(one.magnitude, other.magnitude);
	}
	return likeness;
}

/** 0 within one decade, 1 from three decades apart on. */
function decadesApart(one: number, other: number): number {
	const apart = Math.abs(Math.log10(Math.max(one, 1)) - Math.log10(Math.max(other, 1)));
	return Math.min(1, Math.max(0, apart - 1) / 2);
}
