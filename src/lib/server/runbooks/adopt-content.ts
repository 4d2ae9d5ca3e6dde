import type { Actor } from '$lib/domain/person/person';
import { SYSTEM } from '$lib/domain/person/person';
import { parseRunbook } from '$lib/domain/runbook/parse-runbook';
import { reasonsAgainstPublishing } from '$lib/domain/runbook/publish-gate';
import { nextReview } from '$lib/domain/runbook/review';
import type { RunbookInput } from '$lib/domain/runbook/runbook-input';
import { record } from '../audit/audit-service';
import { toJson } from '../db/json';
import { SettingModel } from '../db/models/setting';
import { write } from '../db/transaction';
import { log } from '../log';
import { runbookChanged } from '../search/indexing';
import { contentRunbooks, type ContentRunbook } from './content-runbooks';
import { listSlugs } from './runbook-store';
import { insertRunbook } from './runbook-write-store';
import { weighBody } from './weigh-runbook';

/** Set once the runbooks that Catchwater comes with were taken in: what a team retires stays retired. */
const MARKER = 'contentRunbooks';

interface Adoptable {
	slug: string;
	input: RunbookInput;
	published: boolean;
}

/** Reads a file; one with problems is left out, and one that the gate refuses becomes a draft. */
async function readFile({ slug, markdown }: ContentRunbook): Promise<Adoptable[]> {
	const { input, problems } = parseRunbook(markdown);
	if (input === null || problems.length > 0) {
		log().warn({ slug, problems }, 'a runbook of content/runbooks was left out');
		return [];
	}
	const reasons = reasonsAgainstPublishing(input.body, await weighBody(input));
	return [{ slug, input, published: reasons.length === 0 }];
}

/**
 * Takes in the runbooks of content/runbooks when a data folder is first started, published where the gate lets
 * them. Answers how many; 0 where that was done before.
 */
export async function adoptContent(actor: Actor = SYSTEM): Promise<number> {
	if ((await SettingModel.findByPk(MARKER)) !== null) return 0;
	const files = (await Promise.all(contentRunbooks().map(readFile))).flat();
	const now = new Date().toISOString();
	return write(async (transaction) => {
		const taken = new Set(await listSlugs());
		const fresh = files.filter(({ slug }) => !taken.has(slug));
		for (const { slug, input, published } of fresh) {
			await insertRunbook(
				{
					slug,
					state: published ? 'published' : 'draft',
					ownerId: null,
					reviewDue: published ? nextReview(now, input.reviewEveryDays) : null,
					now,
					createdById: actor.personId
				},
				input,
				transaction
			);
			await runbookChanged(slug, transaction);
			await record(actor, 'runbook.adopt', `runbook:${slug}`, { title: input.title }, transaction);
		}
		await SettingModel.create({ key: MARKER, value: toJson({ adoptedAt: now }) }, { transaction });
		return fresh.length;
	});
}
