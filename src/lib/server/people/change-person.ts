import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import type { PersonPatch } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import * as audit from '../audit/audit-service';
import { write, type Transaction } from '../db/transaction';
import { changedMeanwhile } from '../incidents/refusals';
import { deleteSessionsOf } from '../sessions/session-store';
import { revokeTokensOf } from '../sessions/token-store';
import { needsAdministrator, toDetail, type PersonDetail } from './person-detail';
import * as store from './people-store';

type Standing = Pick<store.PersonRecord, 'name' | 'role' | 'deactivatedAt'>;

function apply(before: store.PersonRecord, patch: PersonPatch, now: string): Standing {
	const isActive = before.deactivatedAt === null;
	const deactivatedAt =
		patch.active === undefined || patch.active === isActive
			? before.deactivatedAt
			: patch.active
				? null
				: now;
	return { name: patch.name ?? before.name, role: patch.role ?? before.role, deactivatedAt };
}

function isAdministrator({ role, deactivatedAt }: Standing): boolean {
	return role === 'administrator' && deactivatedAt === null;
}

/** Refuses what would leave nobody who can manage people. */
async function refuseLosingTheLast(before: store.PersonRecord, after: Standing): Promise<Outcome<null>> {
	if (!isAdministrator(before) || isAdministrator(after)) return ok(null);
	if ((await store.countOtherAdministrators(before.id)) > 0) return ok(null);
	const reason = `${before.name} is the last administrator who can sign in: nobody could manage people any more.`;
	return fail('refused', `${reason} Make somebody else an administrator first.`, { reasons: [reason] });
}

/** Ends everything by which a person gets in. What they wrote stays, under their name. */
async function shut(id: number, now: string, t: Transaction): Promise<void> {
	await deleteSessionsOf(id, t);
	await revokeTokensOf(id, now, t);
	await store.deleteLinksOf(id, t);
}

async function auditChanges(
	actor: Actor,
	before: store.PersonRecord,
	after: Standing,
	t: Transaction
): Promise<void> {
	const note = (action: string, detail: Record<string, unknown>) =>
		audit.record(actor, action, `person:${before.id}`, detail, t);
	if (after.name !== before.name) await note('person.rename', { from: before.name, to: after.name });
	if (after.role !== before.role) await note('person.role', { from: before.role, to: after.role });
	if (after.deactivatedAt !== before.deactivatedAt)
		await note(after.deactivatedAt === null ? 'person.reactivate' : 'person.deactivate', {});
}

/**
 * Changes a person's name or role, closes their account or opens it again; based on a revision. The last
 * administrator stays one. Closing ends sessions, tokens and links in the same transaction.
 */
export async function update(
	actor: Actor,
	id: number,
	revision: number,
	patch: PersonPatch
): Promise<Outcome<PersonDetail>> {
	if (!can(actor, 'people.manage')) return needsAdministrator();
	const now = new Date().toISOString();
	return write(async (t) => {
		const before = await store.findById(id);
		if (!before) return fail('not_found', `There is no person ${id}.`);
		if (before.revision !== revision) return changedMeanwhile(before.name, revision, toDetail(before));
		const after = apply(before, patch, now);
		const isChanged = (['name', 'role', 'deactivatedAt'] as const).some((key) => after[key] !== before[key]);
		if (!isChanged) return ok(toDetail(before));
		const allowed = await refuseLosingTheLast(before, after);
		if (!allowed.ok) return allowed;
		await store.updatePerson(id, after, t);
		if (before.deactivatedAt === null && after.deactivatedAt !== null) await shut(id, now, t);
		await auditChanges(actor, before, after, t);
		return ok(toDetail({ ...before, ...after, revision: before.revision + 1 }));
	});
}
