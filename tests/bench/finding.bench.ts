/**
 * `npm run bench -- finding [incidents]`: how long precedents and search take, beside SQLite's own full-text search
 * for the same words through the same driver, and whether the event loop stays free.
 */
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { monitorEventLoopDelay, performance } from 'node:perf_hooks';
import { chooseTerms, listTerms, RAREST_WORDS } from '$lib/domain/precedent/choose-terms';
import { SYSTEM } from '$lib/domain/person/person';
import { anyOf } from '$lib/domain/search/match-expression';
import { overrideConfig } from '$lib/server/config';
import { closeDatabase, openDatabase } from '$lib/server/db/connection';
import { select } from '$lib/server/db/query';
import * as precedents from '$lib/server/precedents/precedents-service';
import { countsOf } from '$lib/server/precedents/term-counts';
import { asYouType } from '$lib/server/search/as-you-type';
import { reindexAll } from '$lib/server/search/indexing';
import * as search from '$lib/server/search/search-service';
import { drawReading, drawText, fillCorpus, random } from './corpus';

const ROUNDS = 25;
const QUESTION_WORDS = 300;
const MOST_RATIO = 6;
const MOST_MS = 25;
const MOST_TYPING_MS = 30;
const MOST_BLOCKED_MS = 50;

const incidents = Number(process.argv[2] ?? 10_000);

async function main(): Promise<void> {
	const dataDir = await mkdtemp(path.join(tmpdir(), 'catchwater-bench-'));
	overrideConfig({ dataDir, logLevel: 'silent' });
	await openDatabase(dataDir);
	try {
		await fillCorpus(incidents);
		const blocked = monitorEventLoopDelay({ resolution: 5 });
		blocked.enable();
		const started = performance.now();
		await reindexAll();
		print('indexing, ms each', (performance.now() - started) / incidents, null, null, '');
		await asYouType().load();
		await measurePrecedents();
		await measureTyping();
		blocked.disable();
		print('longest block, ms', blocked.max / 1e6, null, null, `<= ${MOST_BLOCKED_MS}`);
		print('resident, MB', process.memoryUsage().rss / 1048576, null, null, '');
	} finally {
		await closeDatabase();
		await rm(dataDir, { recursive: true, force: true });
	}
}

/** Precedents for a draft of 300 words and 4 symptoms, beside bm25() for the 25 rarest of its words. */
async function measurePrecedents(): Promise<void> {
	const ours: number[] = [];
	const reference: number[] = [];
	for (let round = 0; round < ROUNDS; round++) {
		const text = drawText(QUESTION_WORDS);
		const readings = [drawReading()];
		reference.push(await timeOf(() => askPlain(text)));
		ours.push(await timeOf(() => precedents.forDraft(SYSTEM, { text, readings })));
	}
	const ratio = median(ours) / median(reference);
	print(
		'precedents, median ms',
		median(ours),
		median(reference),
		ratio,
		`<= ${MOST_RATIO} x or ${MOST_MS} ms`
	);
	print('precedents, p95 ms', percentile(ours, 0.95), percentile(reference, 0.95), null, '<= 60 ms');
}

async function askPlain(text: string): Promise<void> {
	const terms = listTerms(text);
	const counts = await countsOf(terms);
	const rarest = chooseTerms(terms, counts.of, counts.documents).terms.slice(0, RAREST_WORDS);
	await select(
		'SELECT rowid, bm25(incidentText) AS score FROM incidentText WHERE incidentText MATCH :expression ORDER BY score LIMIT 10',
		{ expression: anyOf(rarest) ?? '"-"' }
	);
}

async function measureTyping(): Promise<void> {
	const ours: number[] = [];
	const reference: number[] = [];
	for (let round = 0; round < ROUNDS; round++) {
		const words = drawText(2).split(' ');
		const typed = `${words[0]} ${words[1]?.slice(0, 4 + Math.floor(random() * 3))}`;
		reference.push(
			await timeOf(() =>
				select('SELECT rowid FROM incidentText WHERE incidentText MATCH :expression ORDER BY rank LIMIT 20', {
					expression: words.map((word) => `"${word}"`).join(' AND ')
				})
			)
		);
		ours.push(await timeOf(() => search.find(SYSTEM, { q: typed, limit: 8 })));
	}
	print('search as one types, median ms', median(ours), median(reference), null, '');
	print(
		'search as one types, p95 ms',
		percentile(ours, 0.95),
		percentile(reference, 0.95),
		null,
		`<= ${MOST_TYPING_MS} ms`
	);
}

async function timeOf(run: () => Promise<unknown>): Promise<number> {
	const started = performance.now();
	await run();
	return performance.now() - started;
}

function percentile(values: readonly number[], part: number): number {
	const sorted = [...values].sort((one, other) => one - other);
	return sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * part))] ?? 0;
}

function median(values: readonly number[]): number {
	return percentile(values, 0.5);
}

function print(
	subject: string,
	ours: number,
	reference: number | null,
	ratio: number | null,
	bound: string
): void {
	const cells = [ours, reference, ratio].map((value) =>
		(value === null ? '' : value.toFixed(2)).padStart(10)
	);
	console.log(subject.padEnd(32), ...cells, bound);
}

console.log(`${incidents} incidents`.padEnd(32), '      ours', ' reference', '     ratio', 'bound');
await main();
