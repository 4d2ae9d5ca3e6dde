import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { computeSizing } from '$lib/domain/sizing/compute-sizing';
import type { Sizing, SizingInput } from '$lib/domain/sizing/sizing';

/** The memory that an operator needs and what happens at the settings around the present one. Stores nothing. */
export function compute(actor: Actor, input: SizingInput): Outcome<Sizing> {
	if (!can(actor, 'reading.make')) return fail('forbidden', 'Your role does not allow sizing.');
	return ok(computeSizing(input));
}
