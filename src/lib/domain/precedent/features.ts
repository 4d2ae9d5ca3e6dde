import type { EvidenceProfile } from './precedent';

/** Every incident that has any evidence profile carries this one: the count that rarity is reckoned from. */
export const ANY_EVIDENCE = 'evidence';

export const symptomFeature = (id: string): string => `symptom:${id}`;
export const causeFeature = (id: string): string => `cause:${id}`;
export const statementFeature = (fingerprint: string): string => `statement:${fingerprint}`;
export const relationFeature = (relation: string): string => `relation:${relation}`;
export const shapeFeature = (shape: string): string => `shape:${shape}`;
export const traitFeature = (trait: string): string => `trait:${trait}`;

/** The features under which an incident's evidence can be found; empty: it has none. */
export function featuresOf(profile: EvidenceProfile): string[] {
	const features = [
		...profile.symptoms.map((symptom) => symptomFeature(symptom.id)),
		...profile.causes.map((cause) => causeFeature(cause.id)),
		...profile.fingerprints.map(statementFeature),
		...profile.relations.map(relationFeature),
		...profile.shapes.map(shapeFeature),
		...profile.traits.map(traitFeature)
	];
	return features.length === 0 ? [] : [...new Set([ANY_EVIDENCE, ...features])];
}

/**
 * Rarity from counts: ln(1 + (N - n + 0.5) / (n + 0.5)), the inverse document frequency of BM25 in the form
 * that stays positive when most documents have the feature (facts: Robertson and Zaragoza 2009, with the 1
 * added for small collections). A feature that nobody has yet is as rare as one that one incident has.
 */
export function rarityFrom(
	counts: ReadonlyMap<string, number>,
	incidents: number
): (feature: string) => number {
	const total = Math.max(incidents, 1);
	return (feature) => {
		const holders = Math.min(Math.max(counts.get(feature) ?? 1, 1), total);
		return Math.log(1 + (total - holders + 0.5) / (holders + 0.5));
	};
}
