import type { Actor } from '$lib/domain/person/person';
import { nextReview } from '$lib/domain/runbook/review';
import { write } from '../db/transaction';
import { DEMO_PASSWORD } from '../people/demo-password';
import { hashPassword } from '../people/password';
import { insertPerson } from '../people/people-store';
import { findRunbook } from '../runbooks/runbook-store';
import { updateKeepers } from '../runbooks/runbook-write-store';
import { runbookChanged } from '../search/indexing';
import type { DemoPerson } from './demo-content';

/** Before the first incident. */
const JOINED_AT = '2024-11-25T08:00:00.000Z';
const DAY_MS = 86_400_000;

/** Adds the people of the demonstration; answers their actors by key. */
export async function fillPeople(people: readonly DemoPerson[]): Promise<Map<string, Actor>> {
	const actors = new Map<string, Actor>();
	for (const { key, name, email, role } of people) {
		const passwordHash = await hashPassword(DEMO_PASSWORD);
		const id = await write((transaction) =>
			insertPerson({ name, email, role, passwordHash, createdAt: JOINED_AT }, transaction)
		);
		actors.set(key, { personId: id, name, role, via: 'session', tokenId: null });
	}
	return actors;
}

/**
 * Gives every runbook its owner and, from the curators, a reviewer who is somebody else. Reviews fall due one
 * after another, the first of them already over.
 */
export async function fillKeepers(
	people: readonly DemoPerson[],
	actors: ReadonlyMap<string, Actor>,
	now: Date
): Promise<void> {
	const curators = people.filter(({ role }) => role === 'curator');
	const kept = people.flatMap(({ key, runbooks }) => runbooks.map((slug) => ({ key, slug })));
	for (const [index, { key, slug }] of kept.entries()) {
		const runbook = await findRunbook(slug);
		if (runbook === null) throw new Error(`The demonstration names a runbook ${slug} that there is not.`);
		const reviewer = curators.find((curator) => curator.key !== key);
		const readAt = new Date(
			now.getTime() - (runbook.reviewEveryDays + 3 - index * 11) * DAY_MS
		).toISOString();
		await write(async (transaction) => {
			await updateKeepers(
				slug,
				{
					ownerId: actors.get(key)?.personId ?? null,
					reviewerId: (reviewer && actors.get(reviewer.key)?.personId) ?? null,
					reviewDue: nextReview(readAt, runbook.reviewEveryDays)
				},
				transaction
			);
			await runbookChanged(slug, transaction);
		});
	}
}
