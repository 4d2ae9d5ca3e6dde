import { database } from '$lib/server/db/connection';
import { execute, select } from '$lib/server/db/query';
import { anyOf } from '$lib/domain/search/match-expression';
import type { FolderIncident } from './evidence-folder';

const DEPTH = 10;
const RAREST = 25;

type Ranker = (number: number) => Promise<number[]>;

/**
 * The yardstick: an FTS5 table with nothing of ours (its default tokenizer, one column, bm25() as it comes) over
 * the same texts, asked with the words of title and narrative.
 */
export async function makePlainIndex(
	incidents: readonly FolderIncident[],
	numbers: ReadonlyMap<string, number>
): Promise<{ byAllWords: Ranker; byRarest: Ranker }> {
	await database().sequelize.query('CREATE VIRTUAL TABLE plainText USING fts5(text)');
	await database().sequelize.query('CREATE VIRTUAL TABLE plainTerms USING fts5vocab(plainText, row)');
	const questions = new Map<number, string>();
	for (const incident of incidents) {
		const number = numbers.get(incident.id) ?? 0;
		const question = `${incident.title}\n${incident.narrative}`;
		questions.set(number, question);
		await execute('INSERT INTO plainText(rowid, text) VALUES (:number, :text)', {
			number,
			text: `${question}\n${incident.resolution}`
		});
	}
	const rank = async (number: number, terms: readonly string[]) => {
		const expression = anyOf(terms) ?? '"-"';
		const rows = await select<{ number: number }>(
			`SELECT rowid AS number FROM plainText WHERE plainText MATCH :expression AND rowid <> :number
			ORDER BY bm25(plainText) LIMIT :depth`,
			{ expression, number, depth: DEPTH }
		);
		return rows.map((row) => row.number);
	};
	const wordsOf = (number: number) => [
		...new Set((questions.get(number) ?? '').toLowerCase().match(/[\p{L}\p{N}]+/gu) ?? [])
	];
	return {
		byAllWords: (number) => rank(number, wordsOf(number)),
		byRarest: async (number) => {
			const counted = await select<{ term: string; doc: number }>(
				'SELECT term, doc FROM plainTerms WHERE term IN (:words) ORDER BY doc, term LIMIT :rarest',
				{ words: wordsOf(number), rarest: RAREST }
			);
			return rank(
				number,
				counted.map((row) => row.term)
			);
		}
	};
}
