import type { IncidentChange, IncidentFacts } from '$lib/domain/incident/change-incident';
import type { Actor, Person } from '$lib/domain/person/person';
import { writeCause } from '$lib/domain/symptom/id-words';
import type { Transaction } from '../db/transaction';
import { insertEntry } from './entry-store';

/** A name as Markdown shows it unchanged. */
export function escapeMarkdown(text: string): string {
	return text.replaceAll(/[\\`*_[\]<>&#|~!]/g, (character) => `\\${character}`);
}

function describeMove(before: IncidentFacts, { after }: IncidentChange, reason: string | null): string {
	switch (after.state) {
		case 'open':
			return `Open again (it was ${before.state}). ${reason ?? ''}`.trim();
		case 'contained':
			return 'Contained.';
		case 'resolved':
			return `Resolved. Cause: ${escapeMarkdown(writeCause(after.cause ?? ''))}.`;
		case 'reviewed':
			return 'Reviewed.';
	}
}

function describeOwner(actor: Actor, owner: Person | null): string {
	if (owner === null) return 'Nobody is on it any more.';
	if (owner.id === actor.personId) return `Taken by ${escapeMarkdown(owner.name)}.`;
	return `Handed over to ${escapeMarkdown(owner.name)}.`;
}

/** What an edit changes that a reader of the log must know of: the state, and who is on it. */
export async function logChanges(
	edit: {
		number: number;
		actor: Actor;
		before: IncidentFacts;
		change: IncidentChange;
		owner: Person | null;
		reason: string | null;
		now: string;
	},
	transaction: Transaction
): Promise<void> {
	const { actor, before, change, now } = edit;
	const texts: string[] = [];
	if (change.changed.includes('state')) texts.push(describeMove(before, change, edit.reason));
	if (change.changed.includes('ownerId')) texts.push(describeOwner(actor, edit.owner));
	for (const text of texts)
		await insertEntry(
			{
				incidentNumber: edit.number,
				at: now,
				text,
				authorId: actor.personId,
				kind: 'state',
				createdAt: now
			},
			transaction
		);
}
