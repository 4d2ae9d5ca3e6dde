import type { Actor, Person, Role } from '$lib/domain/person/person';
import { fail } from '$lib/domain/problem';
import type { PersonRecord } from './people-store';

/** A person as administrators see them. */
export interface PersonDetail extends Person {
	email: string;
	role: Role;
	/** Whether they may sign in. */
	active: boolean;
	createdAt: string;
	deactivatedAt: string | null;
	/** null: never, or before it was kept. */
	lastSignInAt: string | null;
	/** False: they have not chosen one yet. */
	hasPassword: boolean;
	revision: number;
}

/** The record without its secrets. */
export function toDetail({ passwordHash, ...record }: PersonRecord): PersonDetail {
	return { ...record, active: record.deactivatedAt === null, hasPassword: passwordHash !== null };
}

/** The person as who acts, for what they do before they have a session. */
export function toActor({ id, name, role }: Pick<PersonRecord, 'id' | 'name' | 'role'>): Actor {
	return { personId: id, name, role, via: 'session', tokenId: null };
}

export function needsAdministrator() {
	return fail('forbidden', 'Only an administrator manages people.');
}
