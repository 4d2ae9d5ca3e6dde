import { can } from '$lib/domain/person/can';
import { SYSTEM, type Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { record } from '../audit/audit-service';
import { write } from '../db/transaction';
import { insertEntry } from '../incidents/entry-store';
import { log } from '../log';
import { incidentChanged } from '../search/indexing';
import { currentSettings } from '../settings/settings-service';
import { markPending } from './evidence-files';
import { updateEvidence } from './evidence-store';
import { quoteName, settleFiles } from './keep-evidence';
import { countDueFiles, listDueFiles, type DueFile } from './retention-store';

const DAY_MS = 24 * 60 * 60 * 1000;
/** Files looked up at once. */
const BATCH = 100;

function momentOf(evidenceDays: number): string {
	return new Date(Date.now() - evidenceDays * DAY_MS).toISOString();
}

/** How many files are due under so many days (null: none ever is). */
export async function countDue(actor: Actor, evidenceDays: number | null): Promise<Outcome<number>> {
	if (!can(actor, 'settings.manage')) return fail('forbidden', 'Only an administrator sees the settings.');
	return ok(evidenceDays === null ? 0 : await countDueFiles(momentOf(evidenceDays)));
}

/** Takes one file away: its row and readings stay, without the hash by which the file could be had. */
async function expireOne({ id, incidentNumber, name, sha256 }: DueFile, evidenceDays: number): Promise<void> {
	const now = new Date().toISOString();
	await markPending(sha256);
	await write(async (transaction) => {
		await updateEvidence(id, { sha256: '' }, transaction);
		await insertEntry(
			{
				incidentNumber,
				at: now,
				text: `The file ${quoteName(name)} is no longer kept: files of reviewed incidents go after ${evidenceDays} days. What was read from it stays.`,
				authorId: null,
				kind: 'evidence',
				createdAt: now
			},
			transaction
		);
		const detail = { incident: incidentNumber, name, sha256, evidenceDays };
		await record(SYSTEM, 'evidence.expire', `evidence:${id}`, detail, transaction);
		await incidentChanged(incidentNumber, transaction);
	});
	// The bytes go with the last row that names them.
	await settleFiles([sha256]);
}

/**
 * Removes the files of reviewed incidents whose time is up, as the settings say; what was read from them stays.
 * Answers how many went. Stops between two files when `isOver` says so.
 */
export async function expireEvidence(isOver: () => boolean = () => false): Promise<number> {
	const { evidenceDays } = await currentSettings();
	if (evidenceDays === null) return 0;
	let expired = 0;
	for (;;) {
		const due = await listDueFiles(momentOf(evidenceDays), BATCH);
		if (due.length === 0) return expired;
		for (const file of due) {
			if (isOver()) return expired;
			await expireOne(file, evidenceDays);
			expired += 1;
		}
	}
}

/** Runs `expireEvidence` now and once a day, in the background. Answers what stops it. */
export function startRetention(): () => Promise<void> {
	let isOver = false;
	const run = () =>
		expireEvidence(() => isOver).then(
			(expired) => {
				if (expired > 0) log().info({ expired }, 'evidence files whose time was up are gone');
			},
			(error: unknown) => log().error({ err: error }, 'old evidence could not be removed')
		);
	let running = run();
	const daily = setInterval(() => (running = running.then(run)), DAY_MS);
	daily.unref();
	return () => {
		isOver = true;
		clearInterval(daily);
		return running;
	};
}
