import { reasonsAgainstPublishing, type WeighedStep } from '$lib/domain/runbook/publish-gate';
import { sayWhyNot, standingAfter } from '$lib/domain/runbook/review';
import { approvalOf } from '$lib/domain/runbook/revision';
import { findDeadLinks } from './dead-links';
import { standingOf, weigh } from './describe-runbook';
import { listEvents } from './revision-store';
import type { StoredRunbook } from './runbook-store';

/** Every reason of the text itself why it may not be published; empty: it may. */
export async function listTextReasons(
	body: string,
	steps: readonly WeighedStep[],
	ownSlug: string | null
): Promise<string[]> {
	const dead = await findDeadLinks(body, steps.length, ownSlug);
	return [...new Set([...reasonsAgainstPublishing(body, steps), ...dead])];
}

/** Every reason why the newest text of a runbook may not be published: its state, its approval, its text. */
export async function listPublishReasons(newest: StoredRunbook): Promise<string[]> {
	const { id, slug, body, newestRevision } = newest;
	const standing = standingOf(newest);
	const events = await listEvents(id, [newestRevision]);
	const reasons: string[] = [];
	if (standingAfter(standing, 'publish') === null) reasons.push(sayWhyNot(standing, 'publish'));
	else if (approvalOf(events.get(newestRevision) ?? []) === null)
		reasons.push(`Revision ${newestRevision} is not approved yet: somebody other than its author has to.`);
	return [...reasons, ...(await listTextReasons(body, await weigh(newest), slug))];
}
