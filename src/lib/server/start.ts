import { building } from '$app/environment';
import { config, ConfigError, type Config } from './config';
import { closeDatabase, openDatabase } from './db/connection';
import { releaseRunningKeys } from './http/idempotency-store';
import { log } from './log';
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

/** Opens the data folder before the first request, and closes it after the last. */
export async function startServer(): Promise<void> {
	if (building) return;
	const settings = requireConfig();
	readSecretKey(settings);
	await openDatabase(settings.dataDir);
	await releaseRunningKeys();
	await adoptContent();
	startSearch();
	const tidying = setInterval(() => {
		sessions.deleteExpired().catch((error: unknown) => log().error({ err: error }, 'tidying failed'));
	}, TIDY_EVERY_MS);
	tidying.unref();
	// The adapter's event, after the last answer was sent.
	process.once('sveltekit:shutdown', () => {
		clearInterval(tidying);
		closeDatabase().catch((error: unknown) => log().error({ err: error }, 'closing failed'));
	});
}
