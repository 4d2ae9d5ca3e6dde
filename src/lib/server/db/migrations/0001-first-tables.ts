import { runAll, type Migration } from './migration';

const PEOPLE = [
	`CREATE TABLE people (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		name TEXT NOT NULL,
		email TEXT NOT NULL UNIQUE CHECK (email = lower(email)),
		role TEXT NOT NULL CHECK (role IN ('reader', 'responder', 'curator', 'administrator')),
		passwordHash TEXT,
		createdAt TEXT NOT NULL,
		deactivatedAt TEXT,
		revision INTEGER NOT NULL DEFAULT 1
	) STRICT`,
	`CREATE TABLE signInLinks (
		tokenHash TEXT PRIMARY KEY,
		personId INTEGER NOT NULL REFERENCES people(id) ON DELETE CASCADE,
		expiresAt TEXT NOT NULL,
		usedAt TEXT
	) STRICT`,
	`CREATE TABLE sessions (
		idHash TEXT PRIMARY KEY,
		personId INTEGER NOT NULL REFERENCES people(id) ON DELETE CASCADE,
		createdAt TEXT NOT NULL,
		expiresAt TEXT NOT NULL,
		lastSeenAt TEXT NOT NULL,
		userAgent TEXT
	) STRICT`,
	'CREATE INDEX sessionsByPerson ON sessions(personId)',
	`CREATE TABLE tokens (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		personId INTEGER NOT NULL REFERENCES people(id) ON DELETE CASCADE,
		name TEXT NOT NULL,
		tokenHash TEXT NOT NULL UNIQUE,
		role TEXT NOT NULL CHECK (role IN ('reader', 'responder', 'curator', 'administrator')),
		createdAt TEXT NOT NULL,
		expiresAt TEXT NOT NULL,
		lastUsedAt TEXT,
		revokedAt TEXT
	) STRICT`,
	'CREATE INDEX tokensByPerson ON tokens(personId)'
];

const INCIDENTS = [
	// AUTOINCREMENT: a number once given is never given again.
	`CREATE TABLE incidents (
		number INTEGER PRIMARY KEY AUTOINCREMENT,
		title TEXT NOT NULL,
		narrative TEXT NOT NULL DEFAULT '',
		service TEXT,
		engine TEXT,
		engineVersion TEXT,
		database TEXT,
		severity INTEGER NOT NULL DEFAULT 3 CHECK (severity BETWEEN 1 AND 4),
		state TEXT NOT NULL DEFAULT 'open' CHECK (state IN ('open', 'contained', 'resolved', 'reviewed')),
		ownerId INTEGER REFERENCES people(id),
		origin TEXT NOT NULL DEFAULT 'person' CHECK (origin IN ('person', 'alert', 'import', 'demo')),
		startedAt TEXT,
		detectedAt TEXT,
		containedAt TEXT,
		resolvedAt TEXT,
		cause TEXT,
		resolution TEXT,
		labels TEXT NOT NULL DEFAULT '[]',
		revision INTEGER NOT NULL DEFAULT 1,
		mergedInto INTEGER REFERENCES incidents(number),
		createdAt TEXT NOT NULL,
		createdById INTEGER REFERENCES people(id),
		updatedAt TEXT NOT NULL
	) STRICT`,
	'CREATE INDEX incidentsByStart ON incidents(startedAt, number)',
	'CREATE INDEX incidentsByUpdate ON incidents(updatedAt, number)',
	'CREATE INDEX incidentsByState ON incidents(state, severity)',
	'CREATE INDEX incidentsByService ON incidents(service)',
	'CREATE INDEX incidentsByOwner ON incidents(ownerId)',
	`CREATE TABLE incidentRevisions (
		incidentNumber INTEGER NOT NULL REFERENCES incidents(number) ON DELETE CASCADE,
		revision INTEGER NOT NULL,
		changedById INTEGER REFERENCES people(id),
		changedAt TEXT NOT NULL,
		before TEXT NOT NULL,
		PRIMARY KEY (incidentNumber, revision)
	) STRICT`,
	`CREATE TABLE incidentSymptoms (
		incidentNumber INTEGER NOT NULL REFERENCES incidents(number) ON DELETE CASCADE,
		symptomId TEXT NOT NULL,
		weight REAL NOT NULL,
		PRIMARY KEY (incidentNumber, symptomId)
	) STRICT, WITHOUT ROWID`,
	'CREATE INDEX incidentSymptomsBySymptom ON incidentSymptoms(symptomId)',
	`CREATE TABLE entries (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		incidentNumber INTEGER NOT NULL REFERENCES incidents(number) ON DELETE CASCADE,
		at TEXT NOT NULL,
		text TEXT NOT NULL,
		authorId INTEGER REFERENCES people(id),
		kind TEXT NOT NULL CHECK (kind IN ('note', 'evidence', 'state', 'attempt', 'alert')),
		revision INTEGER NOT NULL DEFAULT 1,
		createdAt TEXT NOT NULL,
		updatedAt TEXT NOT NULL
	) STRICT`,
	'CREATE INDEX entriesByIncident ON entries(incidentNumber, at)',
	`CREATE TABLE entryRevisions (
		entryId INTEGER NOT NULL REFERENCES entries(id) ON DELETE CASCADE,
		revision INTEGER NOT NULL,
		text TEXT NOT NULL,
		at TEXT NOT NULL,
		changedById INTEGER REFERENCES people(id),
		changedAt TEXT NOT NULL,
		PRIMARY KEY (entryId, revision)
	) STRICT`,
	`CREATE TABLE evidence (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		incidentNumber INTEGER REFERENCES incidents(number) ON DELETE CASCADE,
		sha256 TEXT NOT NULL,
		name TEXT NOT NULL,
		bytes INTEGER NOT NULL,
		kind TEXT NOT NULL CHECK (kind IN ('plan', 'log', 'picture', 'other')),
		format TEXT NOT NULL,
		state TEXT NOT NULL CHECK (state IN ('reading', 'read', 'failed')),
		addedAt TEXT NOT NULL,
		addedById INTEGER REFERENCES people(id)
	) STRICT`,
	'CREATE INDEX evidenceBySha256 ON evidence(sha256)',
	'CREATE INDEX evidenceByIncident ON evidence(incidentNumber)',
	`CREATE TABLE readings (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		evidenceId INTEGER NOT NULL REFERENCES evidence(id) ON DELETE CASCADE,
		position INTEGER NOT NULL,
		body TEXT NOT NULL,
		UNIQUE (evidenceId, position)
	) STRICT`
];

const RUNBOOKS = [
	`CREATE TABLE runbooks (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		slug TEXT NOT NULL UNIQUE,
		state TEXT NOT NULL CHECK (state IN ('draft', 'in-review', 'published', 'retired')),
		ownerId INTEGER REFERENCES people(id),
		reviewerId INTEGER REFERENCES people(id),
		reviewDue TEXT,
		revision INTEGER NOT NULL DEFAULT 1,
		publishedRevision INTEGER,
		createdAt TEXT NOT NULL,
		updatedAt TEXT NOT NULL
	) STRICT`,
	`CREATE TABLE runbookRevisions (
		runbookId INTEGER NOT NULL REFERENCES runbooks(id) ON DELETE CASCADE,
		revision INTEGER NOT NULL,
		title TEXT NOT NULL,
		summary TEXT NOT NULL,
		body TEXT NOT NULL,
		engines TEXT NOT NULL DEFAULT '[]',
		symptoms TEXT NOT NULL DEFAULT '[]',
		reviewEveryDays INTEGER NOT NULL,
		createdAt TEXT NOT NULL,
		createdById INTEGER REFERENCES people(id),
		PRIMARY KEY (runbookId, revision)
	) STRICT`,
	`CREATE TABLE attempts (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		incidentNumber INTEGER NOT NULL REFERENCES incidents(number) ON DELETE CASCADE,
		runbookSlug TEXT,
		runbookRevision INTEGER,
		title TEXT NOT NULL,
		startedAt TEXT NOT NULL,
		endedAt TEXT,
		byId INTEGER REFERENCES people(id),
		outcome TEXT CHECK (outcome IN ('worked', 'partly', 'no-effect', 'made-worse')),
		note TEXT,
		beforeEvidenceId INTEGER REFERENCES evidence(id) ON DELETE SET NULL,
		afterEvidenceId INTEGER REFERENCES evidence(id) ON DELETE SET NULL,
		revision INTEGER NOT NULL DEFAULT 1
	) STRICT`,
	'CREATE INDEX attemptsByIncident ON attempts(incidentNumber)',
	'CREATE INDEX attemptsByRunbook ON attempts(runbookSlug, outcome)',
	// Without them, removing one piece of evidence would read every attempt.
	'CREATE INDEX attemptsByBefore ON attempts(beforeEvidenceId)',
	'CREATE INDEX attemptsByAfter ON attempts(afterEvidenceId)',
	`CREATE TABLE attemptSteps (
		attemptId INTEGER NOT NULL REFERENCES attempts(id) ON DELETE CASCADE,
		number INTEGER NOT NULL,
		tickedAt TEXT,
		byId INTEGER REFERENCES people(id),
		skipped TEXT,
		PRIMARY KEY (attemptId, number)
	) STRICT`
];

const RECORDS = [
	`CREATE TABLE idempotencyKeys (
		who TEXT NOT NULL,
		route TEXT NOT NULL,
		key TEXT NOT NULL,
		bodyHash TEXT NOT NULL,
		state TEXT NOT NULL CHECK (state IN ('running', 'done')),
		status INTEGER,
		headers TEXT,
		body TEXT,
		createdAt TEXT NOT NULL,
		PRIMARY KEY (who, route, key)
	) STRICT`,
	'CREATE INDEX idempotencyKeysByAge ON idempotencyKeys(createdAt)',
	`CREATE TABLE audit (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		at TEXT NOT NULL,
		actorId INTEGER REFERENCES people(id),
		actorName TEXT NOT NULL,
		via TEXT NOT NULL CHECK (via IN ('session', 'token', 'system')),
		action TEXT NOT NULL,
		subject TEXT NOT NULL,
		detail TEXT NOT NULL DEFAULT '{}'
	) STRICT`,
	'CREATE INDEX auditBySubject ON audit(subject)',
	'CREATE TABLE settings (key TEXT PRIMARY KEY, value TEXT NOT NULL) STRICT'
];

/** In the order in which they may be dropped: whoever refers comes before what it refers to. */
const TABLES = [
	'settings',
	'audit',
	'idempotencyKeys',
	'attemptSteps',
	'attempts',
	'runbookRevisions',
	'runbooks',
	'readings',
	'evidence',
	'entryRevisions',
	'entries',
	'incidentSymptoms',
	'incidentRevisions',
	'incidents',
	'tokens',
	'sessions',
	'signInLinks',
	'people'
];

export const firstTables: Migration = {
	name: '0001-first-tables',
	up: (context) => runAll(context, [...PEOPLE, ...INCIDENTS, ...RUNBOOKS, ...RECORDS]),
	down: (context) =>
		runAll(
			context,
			TABLES.map((table) => `DROP TABLE ${table}`)
		)
};
