import type { Call } from '../call';
import { EVIDENCE_CALLS } from './evidence-calls';
import { FINDING_CALLS } from './finding-calls';
import { INCIDENT_CALLS } from './incident-calls';
import { PEOPLE_CALLS } from './people-calls';
import { RUNBOOK_CALLS } from './runbook-calls';
import { SERVICE_CALLS } from './service-calls';
import { SYMPTOM_CALLS } from './symptom-calls';

/** Every call of the API, as the document lists them. A route without its line here fails a test. */
export const CALLS: readonly Call[] = [
	...SERVICE_CALLS,
	...EVIDENCE_CALLS,
	...FINDING_CALLS,
	...INCIDENT_CALLS,
	...RUNBOOK_CALLS,
	...SYMPTOM_CALLS,
	...PEOPLE_CALLS
];
