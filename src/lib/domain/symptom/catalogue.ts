import { ACCESS_SYMPTOMS } from './definitions/access';
import type { SymptomDefinition } from './definitions/definition';
import { ESTIMATE_SYMPTOMS } from './definitions/estimates';
import { MEMORY_SYMPTOMS } from './definitions/memory';
import { SERVER_SYMPTOMS } from './definitions/server';
import type { SymptomId } from './symptom';

export { CAUSE_CATALOGUE } from './definitions/causes';
export type { CauseDefinition, SymptomDefinition } from './definitions/definition';

const ALL = [...ESTIMATE_SYMPTOMS, ...MEMORY_SYMPTOMS, ...ACCESS_SYMPTOMS, ...SERVER_SYMPTOMS] as const;

/** Fails to compile when a symptom has no definition. */
type Defined = (typeof ALL)[number]['id'];
type Undefined = Exclude<SymptomId, Defined>;
const complete: Undefined extends never ? true : Undefined = true;

/** What each symptom is, how it is recognised and what usually stands behind it, by id. */
export const SYMPTOM_CATALOGUE: Readonly<Record<SymptomId, SymptomDefinition>> = toCatalogue(complete);

function toCatalogue(_complete: true): Record<SymptomId, SymptomDefinition> {
	const byId: Partial<Record<SymptomId, SymptomDefinition>> = {};
	for (const definition of ALL) byId[definition.id] = definition;
	return byId as Record<SymptomId, SymptomDefinition>;
}
