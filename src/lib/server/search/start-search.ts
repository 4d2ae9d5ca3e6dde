import { log } from '$lib/server/log';
import { asYouType } from './as-you-type';
import { catchUp } from './indexing';

/**
 * Loads the as-you-type index and indexes what is behind, in the background: the first page doesn't wait for it.
 * To be called once the database is open.
 */
export function startSearch(): void {
	// A failure takes nothing but the comfort of typing: the full-text index answers alone, and says so here.
	asYouType()
		.load()
		.catch((error: unknown) => log().warn({ err: error }, 'loading the search index failed'));
	catchUp()
		.then((incidents) => {
			if (incidents > 0) log().info({ incidents }, 'indexed what was behind');
		})
		.catch((error: unknown) => log().error({ err: error }, 'indexing what was behind failed'));
}
