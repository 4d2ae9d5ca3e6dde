import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import type { Precedent } from '$lib/domain/precedent/precedent';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { askDraft, askIncident, type Asked, type Draft } from './asked';
import { describePrecedents } from './describe-precedents';
import { findRanked } from './find-ranked';

const DEFAULT_LIMIT = 10;
const MOST_PRECEDENTS = 50;

/** The incidents that resemble a logged one, most similar first, with the reasons why. */
export async function forIncident(
	actor: Actor,
	number: number,
	limit: number = DEFAULT_LIMIT
): Promise<Outcome<Precedent[]>> {
	if (!can(actor, 'precedent.read'))
		return fail('forbidden', 'Reading precedents needs a role that may read.');
	const asked = await askIncident(number);
	return asked === null
		? fail('not_found', `There is no incident ${number}.`)
		: ok(await answer(asked, limit));
}

/** The incidents that resemble unsaved text and evidence, most similar first. Nothing is stored. */
export async function forDraft(
	actor: Actor,
	draft: Draft,
	limit: number = DEFAULT_LIMIT,
	now: Date = new Date()
): Promise<Outcome<Precedent[]>> {
	if (!can(actor, 'precedent.read'))
		return fail('forbidden', 'Reading precedents needs a role that may read.');
	return ok(await answer(askDraft(draft, now), limit));
}

async function answer(asked: Asked, limit: number): Promise<Precedent[]> {
	const found = await findRanked(asked, Math.min(Math.max(limit, 1), MOST_PRECEDENTS));
	return describePrecedents(asked, found);
}
