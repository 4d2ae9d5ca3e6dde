import type { Evidence } from '$lib/domain/incident/incident';
import type { Actor } from '$lib/domain/person/person';
import type { Engine, Reading } from '$lib/domain/reading/reading';
import type { RunbookSummary } from '$lib/domain/runbook/runbook';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import * as runbooks from '../runbooks/runbooks-service';

/** The runbooks for whatever the causes of these readings rest on, by engine. */
async function findRunbooks(
	actor: Actor,
	readings: readonly Reading[]
): Promise<Map<Engine, readonly RunbookSummary[]>> {
	const wanted = new Map<Engine, Set<SymptomId>>();
	for (const { engine, causes } of readings)
		for (const id of causes.flatMap((cause) => cause.because)) {
			const ids = wanted.get(engine) ?? new Set<SymptomId>();
			wanted.set(engine, ids.add(id));
		}
	const found = await Promise.all(
		[...wanted].map(async ([engine, ids]) => {
			const outcome = await runbooks.forSymptoms(actor, [...ids], engine);
			return [engine, outcome.ok ? outcome.value : []] as const;
		})
	);
	return new Map(found);
}

/**
 * Readings whose causes name the published runbooks for the symptoms that they rest on. Done when they are
 * read out, so that a runbook published today is named beside yesterday's evidence.
 */
export async function linkRunbooks(actor: Actor, readings: readonly Reading[]): Promise<Reading[]> {
	const byEngine = await findRunbooks(actor, readings);
	return readings.map((reading) => ({
		...reading,
		causes: reading.causes.map((cause) => ({
			...cause,
			runbooks: (byEngine.get(reading.engine) ?? [])
				.filter((runbook) => runbook.symptoms.some((id) => cause.because.includes(id)))
				.map((runbook) => runbook.slug)
		}))
	}));
}

/** The same for evidence. */
export async function linkEvidence(actor: Actor, evidence: readonly Evidence[]): Promise<Evidence[]> {
	const linked = await linkRunbooks(
		actor,
		evidence.flatMap(({ readings }) => readings)
	);
	let taken = 0;
	return evidence.map((one) => {
		const from = taken;
		taken += one.readings.length;
		return { ...one, readings: linked.slice(from, taken) };
	});
}
