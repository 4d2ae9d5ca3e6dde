import type { OperatorKind } from '../reading/operator';
import { walkOperators } from '../reading/operator';
import type { Symptom, Trail } from '../reading/reading';
import { findToldCauses, findToldSymptoms } from './told';
import { findConcepts } from './trade-words';
import type { CauseId, SymptomId } from '../symptom/symptom';
import { CAUSE_IDS } from '../symptom/symptom';
import { readCourse, readMagnitude } from './figures';
import type {
	EvidenceOfIncident,
	EvidenceProfile,
	PrecedentProfile,
	ProfileSymptom,
	ToldProfile
} from './precedent';
import { findTraits, indexByPath } from './traits';

/** Bounds, so that a log of many statements or a plan of thousands of tables doesn't fill the index. */
const MOST_FINGERPRINTS = 5;
const MOST_RELATIONS = 20;
const MOST_SHAPES = 4;
const MOST_TRAITS = 40;
/** Characters of a text that are looked through for symptoms and causes told in words. */
const LONGEST_TOLD = 8000;
/** A told symptom has no figures: it weighs as one of medium damage. */
const TOLD_WEIGHT = 0.5;

/** Where and when an incident happened, and the cause that was written down. */
export interface ProfileFields {
	service: string | null;
	engine: PrecedentProfile['engine'];
	database: string | null;
	startedAt: string | null;
	/** As written: an id of the catalogue or free text. */
	cause: string | null;
}

/** The profile of an incident without readings. */
export const NO_EVIDENCE: EvidenceProfile = {
	symptoms: [],
	causes: [],
	fingerprints: [],
	relations: [],
	shapes: [],
	traits: [],
	hasRun: false
};

/** The profile of an incident without words. */
export const NOTHING_TOLD: ToldProfile = { ideas: [], toldSymptoms: [], toldCauses: [] };

/** The profile of an incident: what its evidence shows, what its words tell of, and where it happened. */
export function profileOf(
	fields: ProfileFields,
	evidence: EvidenceProfile,
	told: ToldProfile
): PrecedentProfile {
	return {
		...evidence,
		// A plan that ran shows what there is; what the words tell beside it is what somebody feared.
		symptoms: evidence.hasRun ? evidence.symptoms : addTold(evidence.symptoms, told.toldSymptoms),
		toldCauses: told.toldCauses,
		ideas: told.ideas,
		service: fields.service,
		engine: fields.engine,
		database: fields.database,
		startedAt: fields.startedAt,
		confirmedCause: CAUSE_IDS.find((id) => id === fields.cause) ?? null
	};
}

/**
 * What title and narrative tell of; with the resolution (null: not known, or not to be looked at), which was
 * written once it was over and is believed before them.
 */
export function profileWords(text: string, resolution: string | null): ToldProfile {
	const story = text.slice(0, LONGEST_TOLD);
	const storyIdeas = findConcepts(story).map((idea) => idea.term);
	const endIdeas = findConcepts((resolution ?? '').slice(0, LONGEST_TOLD)).map((idea) => idea.term);
	const remedied = findToldCauses(endIdeas);
	const feared = findToldCauses(storyIdeas).filter((id) => !remedied.includes(id));
	return {
		ideas: [...new Set([...storyIdeas, ...endIdeas])],
		toldSymptoms: findToldSymptoms(story),
		toldCauses: [
			...remedied.map((id) => ({ id, isRemedied: true })),
			...feared.map((id) => ({ id, isRemedied: false }))
		]
	};
}

/** What the readings of one incident say, taken together: one plan saved in several forms counts once. */
export function profileEvidence(readings: readonly EvidenceOfIncident[]): EvidenceProfile {
	const symptoms = new Map<SymptomId, ProfileSymptom>();
	const causes = new Map<CauseId, EvidenceProfile['causes'][number]>();
	const fingerprints = new Set<string>();
	const relations = new Set<string>();
	const shapes = new Set<string>();
	const traits = new Set<string>();
	for (const reading of readings) {
		for (const symptom of reading.symptoms) keepHeavier(symptoms, toProfileSymptom(symptom, reading));
		for (const { id, confidence, because } of reading.causes) {
			if ((causes.get(id)?.confidence ?? 0) < confidence) causes.set(id, { id, confidence, because });
		}
		for (const fingerprint of fingerprintsOf(reading)) fingerprints.add(fingerprint);
		if (reading.plan === null) continue;
		for (const { relation } of walkOperators(reading.plan.root))
			if (relation !== null) relations.add(relation);
		for (const shape of shapesOf(reading.plan.root, reading.trails)) shapes.add(shape);
		for (const trait of findTraits(reading.plan, reading.trails)) traits.add(trait);
	}
	// One form of the plan without run-time figures takes nothing from the one that has them.
	const hasRun = readings.some(hasRuntimeFigures);
	if (hasRun) symptoms.delete('no-runtime-figures');
	return {
		symptoms: [...symptoms.values()].sort((one, other) => other.weight - one.weight),
		causes: [...causes.values()].sort((one, other) => other.confidence - one.confidence),
		fingerprints: [...fingerprints].slice(0, MOST_FINGERPRINTS),
		relations: [...relations].slice(0, MOST_RELATIONS),
		shapes: [...shapes].slice(0, MOST_SHAPES),
		traits: [...traits].slice(0, MOST_TRAITS),
		hasRun
	};
}

function hasRuntimeFigures(reading: EvidenceOfIncident): boolean {
	return reading.plan !== null && reading.symptoms.every((symptom) => symptom.id !== 'no-runtime-figures');
}

function keepHeavier(symptoms: Map<SymptomId, ProfileSymptom>, found: ProfileSymptom): void {
	const known = symptoms.get(found.id);
	if (known === undefined || known.weight < found.weight) symptoms.set(found.id, found);
}

function toProfileSymptom(symptom: Symptom, reading: EvidenceOfIncident): ProfileSymptom {
	const place = reading.plan === null || symptom.operator === null ? null : symptom.operator;
	const operator =
		reading.plan === null || place === null ? undefined : indexByPath(reading.plan.root).get(place);
	return {
		id: symptom.id,
		weight: symptom.weight,
		magnitude: readMagnitude(symptom),
		course: readCourse(symptom),
		operator: operator?.kind ?? null,
		relation: operator?.relation ?? null,
		told: false
	};
}

function fingerprintsOf(reading: EvidenceOfIncident): string[] {
	const spilling = reading.spills?.statements.map((statement) => statement.fingerprint) ?? [];
	return reading.statement === null ? spilling : [reading.statement.fingerprint, ...spilling];
}

function shapesOf(root: Parameters<typeof indexByPath>[0], trails: readonly Trail[]): string[] {
	const operators = indexByPath(root);
	return trails.map((trail) =>
		trail.steps.map((step): OperatorKind => operators.get(step.operator)?.kind ?? 'other').join('>')
	);
}

/** Adds what the narrative tells of and no evidence shows. */
function addTold(shown: readonly ProfileSymptom[], told: readonly SymptomId[]): ProfileSymptom[] {
	const known = new Set(shown.map((symptom) => symptom.id));
	const added = told
		.filter((id) => !known.has(id))
		.map((id) => ({
			id,
			weight: TOLD_WEIGHT,
			magnitude: null,
			course: null,
			operator: null,
			relation: null,
			told: true
		}));
	return [...shown, ...added];
}
