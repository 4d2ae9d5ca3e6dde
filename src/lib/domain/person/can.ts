import { PERMISSIONS, type Permission } from './permissions';
import { ROLES, type Actor, type Role } from './person';

/** Whose the thing is, where that matters. */
export interface Subject {
	ownerId: number | null;
}

/** Whether a role includes another. */
export function includesRole(role: Role, needed: Role): boolean {
	return ROLES.indexOf(role) >= ROLES.indexOf(needed);
}

/** Whether the actor may: by role, or because the thing is their own and their role allows that. */
export function can(actor: Actor, permission: Permission, subject?: Subject): boolean {
	const rule: { from: Role; own?: Role } = PERMISSIONS[permission];
	if (includesRole(actor.role, rule.from)) return true;
	return (
		rule.own !== undefined &&
		subject !== undefined &&
		actor.personId !== null &&
		subject.ownerId === actor.personId &&
		includesRole(actor.role, rule.own)
	);
}

/**
 * Whether the actor could be allowed on some subject: what can be said before the thing is known. The
 * service asks `can` once more with the thing in hand.
 */
export function couldEver(actor: Actor, permission: Permission): boolean {
	const rule: { from: Role; own?: Role } = PERMISSIONS[permission];
	return includesRole(actor.role, rule.own ?? rule.from);
}
