import { relationFeature, shapeFeature, traitFeature } from '../features';
import { weigh, weightedJaccard } from '../jaccard';
import type { EvidenceProfile, Rarity } from '../precedent';
import { RELATIONS_COUNT, SHAPE_COUNTS, TRAITS_COUNT } from '../weights';

/**
 * How alike two statements and their plans are, 0..1. The same fingerprint is the same statement: 1. Otherwise
 * the traits of the plan, the operators along the trail, and the relations, each by weighted Jaccard.
 * Null: one of them has no plan and no statement.
 */
export function compareStatements(
	one: EvidenceProfile,
	other: EvidenceProfile,
	rarity: Rarity
): number | null {
	if (isBare(one) || isBare(other)) return null;
	if (one.fingerprints.some((fingerprint) => other.fingerprints.includes(fingerprint))) return 1;
	const relations = overlap(one.relations, other.relations, (key) => rarity(relationFeature(key)));
	const shapes = overlap(one.shapes, other.shapes, (key) => rarity(shapeFeature(key)));
	const traits = overlap(one.traits, other.traits, (key) => rarity(traitFeature(key)));
	return RELATIONS_COUNT * relations + SHAPE_COUNTS * shapes + TRAITS_COUNT * traits;
}

function isBare(profile: EvidenceProfile): boolean {
	return profile.fingerprints.length + profile.relations.length + profile.traits.length === 0;
}

function overlap(
	one: readonly string[],
	other: readonly string[],
	weightOf: (key: string) => number
): number {
	return weightedJaccard(weigh(one, weightOf), weigh(other, weightOf)) ?? 0;
}
