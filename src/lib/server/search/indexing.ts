import { featuresOf } from '$lib/domain/precedent/features';
import type { EvidenceProfile } from '$lib/domain/precedent/precedent';
import { profileEvidence, profileWords } from '$lib/domain/precedent/profile';
import { ANALYSIS, indexText, listIdeas } from '$lib/domain/search/index-text';
import { evidenceWords } from '$lib/domain/search/evidence-words';
import { write, type Transaction } from '$lib/server/db/transaction';
import { asYouType } from './as-you-type';
import * as store from './index-store';

/** Incidents indexed in one transaction when all are: other writers get their turn in between. */
const BATCH = 25;

/**
 * Brings words and features of one incident up to date in the caller's transaction. To be called at the end of
 * every transaction that changes an incident, its entries, evidence or readings. The as-you-type index
 * follows after the commit.
 */
export async function incidentChanged(number: number, transaction: Transaction): Promise<void> {
	const incident = await store.readIncidentWords(number);
	if (incident === null) return;
	const { names, readingIds } = await store.readEvidenceState(number);
	const stored = await store.readStoredProfile(number);
	const { evidence, words } = await drawEvidence(number, readingIds, stored);
	const entries = await store.listEntryTexts(number);
	const entryText = entries.map((entry) => entry.text).join('\n\n');
	const told = profileWords(`${incident.title}\n${incident.narrative}`, incident.resolution);
	await store.writeIncidentTerms(number, {
		title: indexText(incident.title),
		narrative: indexText([incident.narrative, incident.cause ?? '', ...incident.labels].join('\n')),
		resolution: indexText(incident.resolution ?? ''),
		entries: indexText(entryText),
		evidence: indexText([words, ...names].join('\n')),
		ideas: [...new Set([...told.ideas, ...listIdeas(entryText)])].join(' ')
	});
	const isCurrent = stored?.analysis === ANALYSIS;
	await store.writeProfile(number, {
		profile: { ...evidence, ...told },
		words,
		readingIds,
		entries: await indexEntries(entries, isCurrent ? stored.entries : ''),
		analysis: ANALYSIS
	});
	if (!isCurrent || stored.readingIds !== readingIds) await store.writePostings(number, featuresOf(evidence));
	const index = asYouType();
	transaction.afterCommit(() =>
		index.put({
			id: `incident:${number}`,
			kind: 'incident',
			key: String(number),
			title: incident.title,
			place: [incident.service, incident.database, incident.engine].filter((part) => part !== null).join(' '),
			symptoms: evidence.symptoms.map((symptom) => symptom.id).join(' '),
			people: incident.owner ?? ''
		})
	);
}

/** What the readings show, drawn anew unless they are those that it was last drawn from. */
async function drawEvidence(
	number: number,
	readingIds: string,
	stored: store.StoredProfile | null
): Promise<{ evidence: EvidenceProfile; words: string }> {
	if (stored !== null && stored.readingIds === readingIds && stored.analysis === ANALYSIS) {
		return { evidence: stored.profile, words: stored.words };
	}
	const readings = readingIds === '' ? [] : await store.listReadings(number);
	return { evidence: profileEvidence(readings), words: evidenceWords(readings) };
}

/** Writes the words of the entries that are new or were edited since; answers which are in the index now. */
async function indexEntries(
	entries: readonly { id: number; revision: number; text: string }[],
	indexed: string
): Promise<string> {
	const known = new Set(indexed.split(' '));
	for (const entry of entries) {
		if (!known.has(`${entry.id}:${entry.revision}`))
			await store.writeEntryTerms(entry.id, indexText(entry.text));
	}
	return entries.map((entry) => `${entry.id}:${entry.revision}`).join(' ');
}

/** Brings the words of one runbook up to date in the caller's transaction. */
export async function runbookChanged(slug: string, transaction: Transaction): Promise<void> {
	const runbook = await store.readRunbookWords(slug);
	if (runbook === null) return;
	await store.writeRunbookTerms(runbook.id, {
		title: indexText(runbook.title),
		summary: indexText(runbook.summary),
		body: indexText(runbook.body)
	});
	const index = asYouType();
	transaction.afterCommit(() =>
		index.put({
			id: `runbook:${slug}`,
			kind: 'runbook',
			key: slug,
			title: runbook.title,
			place: runbook.engines.join(' '),
			symptoms: runbook.symptoms.join(' '),
			people: runbook.owner ?? ''
		})
	);
}

/** Builds words and features of everything anew, batch by batch; answers how many documents there are. */
export async function reindexAll(onProgress: (done: number) => void = () => undefined): Promise<number> {
	await write(() => store.clearIndex());
	let done = await indexInBatches(store.listNumbers, onProgress);
	for (const slug of await store.listSlugs()) {
		await write((transaction) => runbookChanged(slug, transaction));
		onProgress(++done);
	}
	return done;
}

/** Indexes what is missing or was indexed in an older way; answers how many incidents. */
export function catchUp(): Promise<number> {
	return indexInBatches(
		(above, limit) => store.listBehind(ANALYSIS, above, limit),
		() => undefined
	);
}

async function indexInBatches(
	listNext: (above: number, limit: number) => Promise<number[]>,
	onProgress: (done: number) => void
): Promise<number> {
	let done = 0;
	for (let above = 0; ;) {
		const numbers = await listNext(above, BATCH);
		const last = numbers.at(-1);
		if (last === undefined) return done;
		await write(async (transaction) => {
			for (const number of numbers) await incidentChanged(number, transaction);
		});
		above = last;
		done += numbers.length;
		onProgress(done);
	}
}

/** How many incidents and runbooks can be found, and how many incidents are not yet indexed as they should be. */
export async function indexState(): Promise<{ documents: number; behind: number }> {
	return store.countIndex(ANALYSIS);
}
