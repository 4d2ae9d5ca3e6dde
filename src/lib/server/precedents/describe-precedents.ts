import type { Precedent } from '$lib/domain/precedent/precedent';
import { explain } from '$lib/domain/precedent/reasons';
import * as store from './candidate-store';
import type { Found } from './find-ranked';
import type { Asked } from './asked';

/** What is shown of each precedent, in the order in which they were ranked. */
export async function describePrecedents(asked: Asked, found: Found): Promise<Precedent[]> {
	const texts = await store.readTexts(found.ranked.map(({ candidate }) => candidate.number));
	return found.ranked.flatMap((ranked) => {
		const { number, verdict } = ranked.candidate;
		const row = found.rows.get(number);
		if (row === undefined) return [];
		return {
			number,
			title: row.title,
			score: Math.round(ranked.score * 1000) / 1000,
			state: row.state,
			startedAt: row.startedAt,
			resolvedAt: row.resolvedAt,
			resolution: row.resolution,
			cause: row.cause,
			later: row.startedAt !== null && row.startedAt > asked.at,
			reasons: explain(asked.profile, ranked, {
				at: asked.at,
				terms: found.terms,
				askedText: asked.text,
				text: texts.get(number) ?? '',
				rarity: found.rarity
			}),
			verdict
		};
	});
}
