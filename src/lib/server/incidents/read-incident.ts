import type { Incident } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import { listEvidence } from '../evidence/evidence-store';
import { linkEvidence } from '../evidence/link-runbooks';
import { listAttempts } from './attempt-store';
import { withComparisons } from './compare-attempts';
import { listEntries } from './entry-store';
import { findIncident, toSummary } from './incident-store';

/** The whole incident with evidence, log and attempts; null where there is none of that number. */
export async function readIncident(actor: Actor, number: number): Promise<Incident | null> {
	const row = await findIncident(number);
	if (row === null) return null;
	const [evidence, entries, attempts] = await Promise.all([
		listEvidence(number),
		listEntries(number),
		listAttempts(number)
	]);
	return {
		...toSummary(row),
		evidence: await linkEvidence(actor, evidence),
		entries,
		attempts: await withComparisons(attempts, evidence),
		followUps: []
	};
}
