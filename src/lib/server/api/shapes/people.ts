import { z } from 'zod';
import type { AuditLine } from '$lib/domain/audit/audit-line';
import { ROLES } from '$lib/domain/person/person';
import type { Settings } from '$lib/domain/settings/settings';
import type { Invitation } from '../../people/invitations-service';
import type { PersonDetail } from '../../people/person-detail';
import type { TokenRecord } from '../../sessions/tokens-service';
import { personShape } from './incident';
import { id, shapeOf, time } from './shape';

const role = z.enum(ROLES);
const timeOrNull = time.nullable();

/** A person as administrators see them. */
export const personDetailShape = shapeOf<PersonDetail>()(
	'PersonDetail',
	z.object({
		id,
		name: z.string(),
		email: z.string(),
		role,
		active: z.boolean().describe('Whether they may sign in.'),
		createdAt: time,
		deactivatedAt: timeOrNull,
		lastSignInAt: timeOrNull,
		hasPassword: z.boolean(),
		revision: id
	})
);

/** Somebody who was asked to join; the link is in the mail alone. */
export const invitationShape = shapeOf<Invitation>()(
	'Invitation',
	z.object({
		id,
		email: z.string(),
		role,
		state: z.enum(['open', 'expired', 'used', 'revoked']),
		invitedBy: personShape.nullable().describe('null: the system.'),
		createdAt: time,
		expiresAt: time,
		usedAt: timeOrNull,
		revokedAt: timeOrNull,
		revision: id
	})
);

const tokenFields = {
	id,
	personId: id,
	name: z.string(),
	role,
	createdAt: time,
	expiresAt: time,
	lastUsedAt: timeOrNull,
	revokedAt: timeOrNull
};

/** What is known of a token; itself it is shown once. */
export const tokenShape = shapeOf<TokenRecord>()('Token', z.object(tokenFields));

/** A token just made. */
export const madeTokenShape = shapeOf<TokenRecord & { token: string | null }>()(
	'MadeToken',
	z.object({
		...tokenFields,
		token: z
			.string()
			.nullable()
			.describe('Shown this once; null where an Idempotency-Key replays the answer: it is kept nowhere.')
	})
);

/** What is set for the whole installation. */
export const settingsShape = shapeOf<Settings>()(
	'Settings',
	z.object({
		evidenceDays: z
			.int()
			.nullable()
			.describe('Days that files of reviewed incidents are kept after they were resolved; null: for good.'),
		revision: id
	})
);

/** Who did what. */
export const auditLineShape = shapeOf<AuditLine>()(
	'AuditLine',
	z.object({
		id,
		at: time,
		actor: personShape.nullable().describe('null: the system.'),
		actorName: z.string(),
		via: z.enum(['session', 'token', 'system']),
		action: z.string(),
		subject: z.string(),
		detail: z.record(z.string(), z.unknown())
	})
);
