import { building } from '$app/environment';
import { config, ConfigError, type Config } from './config';
import { closeDatabase, openDatabase } from './db/connection';
import { leaveReadings } from './evidence/late-reading';
import { recoverEvidence } from './evidence/recover-evidence';
import { startRetention } from './evidence/retention';
import { releaseRunningKeys } from './http/idempotency-store';
import { log } from './log';
import { startPostman } from './mail/deliver-mail';
import { forgetOldMail } from './mail/mail-service';
import { describeFirst } from './people/first-administrator';
import * as resets from './people/resets-service';
import { closePool, warmUp } from './readings/reading-pool';
import { adoptContent } from './runbooks/adopt-content';
import { startSearch } from './search/start-search';
import { readSecretKey } from './secret-key';
import * as sessions from './sessions/sessions-service';

const TIDY_EVERY_MS = 60 * 60 * 1000;

/** The settings, or the end of the process with one line that names the wrong one. */
function requireConfig(): Config {
	try {
		return config();
	} catch (error) {
		if (!(error instanceof ConfigError)) throw error;
		process.stderr.write(`${error.message}\n`);
		process.exit(1);
	}
}

/**
 * Ends what is under way: readings that outlasted their request, and mail that nobody took, are taken up at the next
 * start.
 */
async function stopServer(jobs: readonly (() => Promise<void>)[]): Promise<void> {
	leaveReadings();
	await resets.settled();
	for (const stop of jobs) await stop();
	await closePool();
	await closeDatabase();
}

/** Removes what has run out: sessions, links, old mail. */
async function tidy(): Promise<void> {
	await sessions.deleteExpired();
	await resets.deleteExpired();
	await forgetOldMail();
}

/** Opens the data folder before the first request, and closes it after the last. */
export async function startServer(): Promise<void> {
	if (building) return;
	const settings = requireConfig();
	readSecretKey(settings);
	await openDatabase(settings.dataDir);
	await releaseRunningKeys();
	await adoptContent();
	startSearch();
	warmUp();
	await recoverEvidence();
	const jobs = [startPostman(), startRetention()];
	const tidying = setInterval(() => {
		tidy().catch((error: unknown) => log().error({ err: error }, 'tidying failed'));
	}, TIDY_EVERY_MS);
	tidying.unref();
	// Not into the log, which is kept and passed on: the code is a secret.
	for (const line of await describeFirst()) process.stdout.write(`${line}\n`);
	// The adapter's event, after the last answer was sent.
	process.once('sveltekit:shutdown', () => {
		clearInterval(tidying);
		stopServer(jobs).catch((error: unknown) => log().error({ err: error }, 'stopping failed'));
	});
}
