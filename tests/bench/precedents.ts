/**
 * `npm run bench:precedents -- DIR`: how good precedents are on a folder in the evidence format.
 *
 * Every case and distractor becomes an incident of a database of its own, through the server's index: title,
 * narrative, resolution, service, times, and the readings of its evidence as saved at night (nothing that was
 * saved after the fix). What case.json says is true (cause, symptoms, remedy) is never used, and no incident
 * has a confirmed cause. A query asks as at night: title, narrative and evidence, not its own resolution.
 */
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { REASON_KINDS, type ReasonKind } from '$lib/domain/precedent/precedent';
import { NO_EVIDENCE, profileOf, profileWords } from '$lib/domain/precedent/profile';
import { wilsonInterval } from '$lib/domain/runbook/record';
import { overrideConfig } from '$lib/server/config';
import { closeDatabase, openDatabase } from '$lib/server/db/connection';
import { askIncident, type Asked } from '$lib/server/precedents/asked';
import { findRanked } from '$lib/server/precedents/find-ranked';
import { bootstrapInterval, mean, ndcg, recallAt } from './evaluation';
import { readFolder, type FolderIncident, type Relevance } from './evidence-folder';
import { fillDatabase } from './fill-database';
import { makePlainIndex } from './plain-index';

const DEPTH = 10;
const RECALL_DEPTH = 5;
/** A precedent of the same cause. */
const RELEVANT = 2;
const WORST_SHOWN = 12;

interface Scores {
	ndcg: { query: string; value: number }[];
	recall: number[];
	hits: boolean[];
}

type Ranker = (number: number) => Promise<number[]>;

async function main(folder: string): Promise<void> {
	const { incidents, relevance } = readFolder(folder);
	const dataDir = await mkdtemp(path.join(tmpdir(), 'catchwater-bench-'));
	overrideConfig({ dataDir, logLevel: 'silent' });
	await openDatabase(dataDir);
	try {
		const numbers = await fillDatabase(incidents);
		await measure(incidents, relevance, numbers);
	} finally {
		await closeDatabase();
		await rm(dataDir, { recursive: true, force: true });
	}
}

async function measure(
	incidents: readonly FolderIncident[],
	relevance: Relevance,
	numbers: ReadonlyMap<string, number>
): Promise<void> {
	console.log(`${Object.keys(relevance).length} queries, ${incidents.length} incidents`);
	console.log(
		`${'ranked by'.padEnd(34)} ${'nDCG@10 [95 %]'.padEnd(23)} ${'recall@5 [95 %]'.padEnd(23)} hit@1 [Wilson 95 %]`
	);
	const alone = (kind: ReasonKind) => (asked: Asked) => findRanked(asked, DEPTH, { [kind]: 1 });
	const all = await run(
		'fusion',
		byServer((asked) => findRanked(asked, DEPTH)),
		relevance,
		numbers
	);
	for (const kind of REASON_KINDS) {
		if (kind !== 'verdict') await run(`${kind} alone`, byServer(alone(kind)), relevance, numbers);
	}
	console.log('questions without evidence');
	const told = (asked: Asked) => findRanked(withoutEvidence(asked), DEPTH);
	const words = await run('words and what they tell of', byServer(told), relevance, numbers);
	const plain = await makePlainIndex(incidents, numbers);
	await run('plain FTS5 bm25(), all words', plain.byAllWords, relevance, numbers);
	await run('plain FTS5 bm25(), 25 rarest', plain.byRarest, relevance, numbers);
	printWorst('fusion', all);
	printWorst('words', words);
}

/** Ranks as the server does for an incident. */
function byServer(find: (asked: Asked) => ReturnType<typeof findRanked>): Ranker {
	return async (number) => {
		const asked = await askIncident(number);
		if (asked === null) throw new Error(`There is no incident ${number}.`);
		return (await find(asked)).ranked.map(({ candidate }) => candidate.number);
	};
}

/** The same question, had nobody attached anything. */
function withoutEvidence(asked: Asked): Asked {
	const told = profileWords(asked.text, null);
	return { ...asked, profile: profileOf({ ...asked.profile, cause: null }, NO_EVIDENCE, told) };
}

async function run(
	name: string,
	rank: Ranker,
	relevance: Relevance,
	numbers: ReadonlyMap<string, number>
): Promise<Scores> {
	const ids = new Map([...numbers].map(([id, number]) => [number, id]));
	const scores: Scores = { ndcg: [], recall: [], hits: [] };
	for (const [query, grades] of Object.entries(relevance)) {
		const number = numbers.get(query);
		if (number === undefined) throw new Error(`relevance.json names ${query}, which is no case.`);
		const ranked = (await rank(number)).map((found) => grades[ids.get(found) ?? ''] ?? 0);
		const value = ndcg(ranked, Object.values(grades), DEPTH);
		if (value !== null) scores.ndcg.push({ query, value });
		const relevant = Object.values(grades).filter((grade) => grade >= RELEVANT).length;
		const met = ranked.map((grade) => grade >= RELEVANT);
		const recall = recallAt(met, relevant, RECALL_DEPTH);
		if (recall === null) continue;
		scores.recall.push(recall);
		scores.hits.push(met[0] === true);
	}
	console.log(toRow(name, scores));
	return scores;
}

function toRow(name: string, scores: Scores): string {
	const values = scores.ndcg.map(({ value }) => value);
	const hits = scores.hits.filter(Boolean).length;
	const wilson = wilsonInterval(hits, scores.hits.length);
	return [
		name.padEnd(34),
		withInterval(mean(values), bootstrapInterval(values)).padEnd(23),
		withInterval(mean(scores.recall), bootstrapInterval(scores.recall)).padEnd(23),
		withInterval(hits / Math.max(1, scores.hits.length), wilson)
	].join(' ');
}

function withInterval(value: number, interval: { low: number; high: number } | [number, number]): string {
	const [low, high] = Array.isArray(interval) ? interval : [interval.low, interval.high];
	return `${value.toFixed(3)} [${low.toFixed(3)}, ${high.toFixed(3)}]`;
}

function printWorst(name: string, scores: Scores): void {
	const worst = [...scores.ndcg].sort((one, other) => one.value - other.value).slice(0, WORST_SHOWN);
	console.log(
		`worst by ${name}: ${worst.map(({ query, value }) => `${query} ${value.toFixed(2)}`).join(', ')}`
	);
}

const [folder] = process.argv.slice(2);
if (folder === undefined) {
	console.error('Usage: npm run bench:precedents -- DIR (a folder in the evidence format)');
	process.exitCode = 2;
} else {
	await main(folder);
}
