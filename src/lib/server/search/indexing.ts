import { featuresOf } from '$lib/domain/precedent/features';
import { profileEvidence } from '$lib/domain/precedent/profile';
import { ANALYSIS, indexIdeas, indexText } from '$lib/domain/search/index-text';
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
	const { evidence, words, entries: indexed } = await bringEvidenceUpToDate(number, readingIds);
	const entries = await store.listEntryTexts(number);
	const entryText = entries.map((entry) => entry.text).join('\n\n');
	const told = [incident.title, incident.narrative, incident.resolution ?? '', entryText].join('\n\n');
	await store.writeIncidentTerms(number, {
		title: indexText(incident.title),
		narrative: indexText([incident.narrative, incident.cause ?? '', ...incident.labels].join('\n')),
		resolution: indexText(incident.resolution ?? ''),
		entries: indexText(entryText),
		evidence: indexText([words, ...names].join('\n')),
		ideas: indexIdeas(told)
	});
	await indexEntries(number, entries, indexed);
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

/** Draws the profile from the readings, unless they are those it was last drawn from. */
async function bringEvidenceUpToDate(
	number: number,
	readingIds: string
): Promise<Pick<store.StoredEvidence, 'evidence' | 'words' | 'entries'>> {
	const stored = await store.readStoredEvidence(number);
	if (stored !== null && stored.readingIds === readingIds && stored.analysis === ANALYSIS) return stored;
	const readings = readingIds === '' ? [] : await store.listReadings(number);
	const evidence = profileEvidence(readings);
	const words = evidenceWords(readings);
	await store.writeEvidence(
		number,
		{ evidence, words, readingIds, analysis: ANALYSIS },
		featuresOf(evidence)
	);
	return { evidence, words, entries: '' };
}

/** Writes the words of the entries that are new or were edited since. */
async function indexEntries(
	number: number,
	entries: readonly { id: number; revision: number; text: string }[],
	indexed: string
): Promise<void> {
	const known = new Set(indexed.split(' '));
	const states = entries.map((entry) => `${entry.id}:${entry.revision}`);
	if (states.every((state) => known.has(state))) return;
	for (const entry of entries) {
		if (!known.has(`${entry.id}:${entry.revision}`))
			await store.writeEntryTerms(entry.id, indexText(entry.text));
	}
	await store.writeEntryState(number, states.join(' '));
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
