import { runAll, type Migration } from './migration';

const UP = [
	'ALTER TABLE people ADD COLUMN lastSignInAt TEXT',
	`CREATE TABLE invitations (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		tokenHash TEXT NOT NULL UNIQUE,
		email TEXT NOT NULL CHECK (email = lower(email)),
		role TEXT NOT NULL CHECK (role IN ('reader', 'responder', 'curator', 'administrator')),
		invitedById INTEGER REFERENCES people(id),
		createdAt TEXT NOT NULL,
		expiresAt TEXT NOT NULL,
		usedAt TEXT,
		revokedAt TEXT,
		revision INTEGER NOT NULL DEFAULT 1
	) STRICT`,
	// One open invitation for an address: a second link would be one that nobody thinks of taking back.
	'CREATE UNIQUE INDEX invitationsOpen ON invitations(email) WHERE usedAt IS NULL AND revokedAt IS NULL',
	`CREATE TABLE passwordResets (
		tokenHash TEXT PRIMARY KEY,
		personId INTEGER NOT NULL REFERENCES people(id) ON DELETE CASCADE,
		createdAt TEXT NOT NULL,
		expiresAt TEXT NOT NULL,
		usedAt TEXT
	) STRICT`,
	'CREATE INDEX passwordResetsByPerson ON passwordResets(personId, createdAt)',
	`CREATE TABLE mails (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		recipient TEXT NOT NULL,
		subject TEXT NOT NULL,
		text TEXT,
		state TEXT NOT NULL CHECK (state IN ('waiting', 'sent', 'kept', 'failed')),
		createdAt TEXT NOT NULL,
		sentAt TEXT,
		tries INTEGER NOT NULL DEFAULT 0,
		nextTryAt TEXT NOT NULL,
		failure TEXT
	) STRICT`,
	"CREATE INDEX mailsWaiting ON mails(nextTryAt) WHERE state = 'waiting'",
	'CREATE INDEX auditByActor ON audit(actorId, id)',
	'CREATE INDEX auditByAction ON audit(action, id)'
];

const DOWN = [
	'DROP INDEX auditByAction',
	'DROP INDEX auditByActor',
	'DROP TABLE mails',
	'DROP TABLE passwordResets',
	'DROP TABLE invitations',
	'ALTER TABLE people DROP COLUMN lastSignInAt'
];

/** Invitations, forgotten passwords, the mail that carries their links, and the audit trail's ways in. */
export const peopleAndMail: Migration = {
	name: '0004-people-and-mail',
	up: (context) => runAll(context, UP),
	down: (context) => runAll(context, DOWN)
};
