import { incidentFilter } from '$lib/domain/incident/incident-filter';
import type { Page } from '$lib/domain/page';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { CAUSE_CATALOGUE, SYMPTOM_CATALOGUE } from '$lib/domain/symptom/catalogue';
import { SYMPTOM_IDS, type SymptomId } from '$lib/domain/symptom/symptom';
import type { SymptomCounts, SymptomPage, SymptomSummary } from '$lib/domain/symptom/symptom-page';
import * as incidents from '../incidents/incidents-service';
import * as runbooks from '../runbooks/runbooks-service';
import { countMonths, countRunbooks, countSymptoms } from './symptom-store';

const NEVER: SymptomCounts = { incidents: 0, open: 0, lastAt: null };
const RECENT = 10;
const MONTHS = 12;

const needsReader = () => fail('forbidden', 'Reading symptoms takes a reader.');

/** Every symptom of the catalogue, those met most often first, with how many runbooks serve it. */
export async function list(actor: Actor): Promise<Outcome<Page<SymptomSummary>>> {
	if (!can(actor, 'symptom.read')) return needsReader();
	const [counts, served] = await Promise.all([countSymptoms(), countRunbooks()]);
	const items = SYMPTOM_IDS.map((id): SymptomSummary => {
		const { title, what } = SYMPTOM_CATALOGUE[id];
		return { id, title, what, ...(counts.get(id) ?? NEVER), runbooks: served.get(id) ?? 0 };
	});
	items.sort((a, b) => b.incidents - a.incidents || SYMPTOM_IDS.indexOf(a.id) - SYMPTOM_IDS.indexOf(b.id));
	return ok({ items, next: null, total: items.length });
}

function isSymptom(id: string): id is SymptomId {
	return SYMPTOM_IDS.some((known) => known === id);
}

/** The twelve months up to now, the oldest first, as "2026-03". */
function lastMonths(now: Date): string[] {
	return Array.from({ length: MONTHS }, (_value, index) =>
		new Date(Date.UTC(now.getUTCFullYear(), now.getUTCMonth() - (MONTHS - 1 - index), 1))
			.toISOString()
			.slice(0, 7)
	);
}

/** What a symptom is and how it is told, what helped against it here, and where it was met. */
export async function read(actor: Actor, id: string): Promise<Outcome<SymptomPage>> {
	if (!can(actor, 'symptom.read')) return needsReader();
	if (!isSymptom(id)) return fail('not_found', `There is no symptom ${id}.`);
	const months = lastMonths(new Date());
	const [counts, byMonth, serving, recent] = await Promise.all([
		countSymptoms(),
		countMonths(id, months[0] ?? ''),
		runbooks.forSymptoms(actor, [id], null),
		incidents.list(actor, incidentFilter.parse({ symptom: [id], limit: RECENT }))
	]);
	if (!serving.ok) return serving;
	if (!recent.ok) return recent;
	const { title, what, recognise, thresholds, usualCauses } = SYMPTOM_CATALOGUE[id];
	return ok({
		...{ id, title, what, recognise },
		thresholds: thresholds.map((threshold) => ({ ...threshold })),
		usualCauses: usualCauses.map((cause) => ({ ...CAUSE_CATALOGUE[cause] })),
		...(counts.get(id) ?? NEVER),
		months: months.map((month) => ({ month, incidents: byMonth.get(month) ?? 0 })),
		runbooks: serving.value,
		recent: recent.value.items
	});
}
