import { firstTables } from './0001-first-tables';
import { precedentsAndSearch } from './0002-precedents-and-search';
import { incidentLists } from './0003-incident-lists';
import { peopleAndMail } from './0004-people-and-mail';
import { runbookReviews } from './0005-runbook-reviews';
import type { Migration } from './migration';

/** Every migration in order. A list, not a folder scan: the built server is one bundle. */
export const MIGRATIONS: readonly Migration[] = [
	firstTables,
	precedentsAndSearch,
	incidentLists,
	peopleAndMail,
	runbookReviews
];
