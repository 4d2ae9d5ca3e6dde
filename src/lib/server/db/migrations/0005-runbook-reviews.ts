import { runAll, type Migration } from './migration';

const UP = [
	// How far the newest text is where an older one is published; NULL: there is no newer one.
	"ALTER TABLE runbooks ADD COLUMN draftState TEXT CHECK (draftState IN ('draft', 'in-review'))",
	'ALTER TABLE runbookRevisions ADD COLUMN note TEXT',
	`CREATE TABLE runbookReviews (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		runbookId INTEGER NOT NULL REFERENCES runbooks(id) ON DELETE CASCADE,
		revision INTEGER NOT NULL,
		action TEXT NOT NULL CHECK (action IN ('submit', 'return', 'approve', 'publish', 'retire')),
		byId INTEGER REFERENCES people(id),
		at TEXT NOT NULL,
		note TEXT
	) STRICT`,
	'CREATE INDEX runbookReviewsByRevision ON runbookReviews(runbookId, revision, id)'
];

const DOWN = [
	'DROP TABLE runbookReviews',
	'ALTER TABLE runbookRevisions DROP COLUMN note',
	'ALTER TABLE runbooks DROP COLUMN draftState'
];

/** A newer text beside the published one, what its author said of it, and who did what with it. */
export const runbookReviews: Migration = {
	name: '0005-runbook-reviews',
	up: (context) => runAll(context, UP),
	down: (context) => runAll(context, DOWN)
};
