import { runAll, type Migration } from './migration';

/**
 * Words as domain/search/index-text.ts prepares them: one space between terms, names whole and in parts, stems.
 * Its tokenizer therefore only has to cut at spaces; every character that is not ASCII is part of a term.
 * Contentless: the text itself stands in its own table.
 */
const TOKENS = `content='', contentless_delete=1, tokenize="ascii tokenchars '_.$~'"`;

const UP = [
	`CREATE VIRTUAL TABLE incidentText USING fts5(title, narrative, resolution, entries, evidence, ideas, ${TOKENS})`,
	// What one hit counts in each column, in their order.
	`INSERT INTO incidentText(incidentText, rank) VALUES ('rank', 'bm25(2.0, 1.0, 1.0, 0.5, 0.2, 12.0)')`,
	'CREATE VIRTUAL TABLE incidentTerms USING fts5vocab(incidentText, row)',
	`CREATE VIRTUAL TABLE runbookText USING fts5(title, summary, body, ${TOKENS})`,
	`INSERT INTO runbookText(runbookText, rank) VALUES ('rank', 'bm25(4.0, 2.0, 1.0)')`,
	`CREATE VIRTUAL TABLE entryText USING fts5(text, ${TOKENS})`,
	`CREATE TABLE precedentProfiles (
		incidentNumber INTEGER PRIMARY KEY REFERENCES incidents(number) ON DELETE CASCADE,
		evidence TEXT NOT NULL,
		words TEXT NOT NULL,
		entries TEXT NOT NULL,
		readingIds TEXT NOT NULL,
		analysis INTEGER NOT NULL
	) STRICT`,
	'CREATE INDEX precedentProfilesByAnalysis ON precedentProfiles(analysis)',
	`CREATE TABLE precedentPostings (
		feature TEXT NOT NULL,
		incidentNumber INTEGER NOT NULL REFERENCES incidents(number) ON DELETE CASCADE,
		PRIMARY KEY (feature, incidentNumber)
	) STRICT, WITHOUT ROWID`,
	'CREATE INDEX precedentPostingsByIncident ON precedentPostings(incidentNumber)',
	`CREATE TABLE precedentFeatures (
		feature TEXT PRIMARY KEY,
		incidents INTEGER NOT NULL
	) STRICT, WITHOUT ROWID`,
	// Counted by triggers, so that a cascade counts as well.
	`CREATE TRIGGER precedentPostingAdded AFTER INSERT ON precedentPostings BEGIN
		INSERT INTO precedentFeatures(feature, incidents) VALUES (new.feature, 1)
		ON CONFLICT (feature) DO UPDATE SET incidents = incidents + 1;
	END`,
	`CREATE TRIGGER precedentPostingRemoved AFTER DELETE ON precedentPostings BEGIN
		UPDATE precedentFeatures SET incidents = incidents - 1 WHERE feature = old.feature;
		DELETE FROM precedentFeatures WHERE feature = old.feature AND incidents <= 0;
	END`
];

const DOWN = [
	'DROP TABLE precedentPostings',
	'DROP TABLE precedentFeatures',
	'DROP TABLE precedentProfiles',
	'DROP TABLE entryText',
	'DROP TABLE runbookText',
	'DROP TABLE incidentTerms',
	'DROP TABLE incidentText'
];

/** The index that precedents and search read: words in FTS5, features of the evidence as postings. */
export const precedentsAndSearch: Migration = {
	name: '0002-precedents-and-search',
	up: (context) => runAll(context, UP),
	down: (context) => runAll(context, DOWN)
};
