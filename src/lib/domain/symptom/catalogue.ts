import { ACCESS_SYMPTOMS } from './definitions/access';
import type { SymptomDefinition } from './definitions/definition';
import { ESTIMATE_SYMPTOMS } from './definitions/estimates';
import { MEMORY_SYMPTOMS } from './definitions/memory';
import { SERVER_SYMPTOMS } from './definitions/server';
import type { SymptomId } from './symptom';

export { CAUSE_CATALOGUE } from './definitions/causes';
export type { CauseDefinition, SymptomDefinition } from './definitions/definition';

/** What each symptom is, how it is recognised and what usually stands behind it. One without a definition does not compile. */
export const SYMPTOM_CATALOGUE: Readonly<Record<SymptomId, SymptomDefinition>> = {
	...ESTIMATE_SYMPTOMS,
	...MEMORY_SYMPTOMS,
	...ACCESS_SYMPTOMS,
	...SERVER_SYMPTOMS
};
