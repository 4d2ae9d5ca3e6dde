import type { Caution } from '$lib/domain/caution/caution';
import type { CautionInput } from '$lib/domain/caution/caution-input';
import { cautionsFor } from '$lib/domain/caution/classify-statement';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';

/** What each statement of a script does to production, in order; nothing is stored and nothing is run. */
export async function read(actor: Actor, input: CautionInput): Promise<Outcome<{ items: Caution[] }>> {
	if (!can(actor, 'reading.make')) return fail('forbidden', 'Cautions take a reader.');
	return ok({ items: await cautionsFor(input.engine, input.engineVersion ?? null, input.sql) });
}
