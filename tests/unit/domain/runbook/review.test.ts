import { describe, expect, it } from 'vitest';
import {
	nextReview,
	REVIEW_ACTIONS,
	sayWhyNot,
	standingAfter,
	standingAfterEdit,
	type Standing
} from '$lib/domain/runbook/review';

const STANDINGS: Standing[] = [
	{ state: 'draft', draft: null },
	{ state: 'in-review', draft: null },
	{ state: 'published', draft: null },
	{ state: 'published', draft: 'draft' },
	{ state: 'published', draft: 'in-review' },
	{ state: 'retired', draft: null }
];

const write = ({ state, draft }: Standing) => (draft === null ? state : `${state}+${draft}`);

describe('standingAfter', () => {
	it('refuses every move that is not in the table', () => {
		const moves = STANDINGS.flatMap((standing) =>
			REVIEW_ACTIONS.flatMap((action) => {
				const after = standingAfter(standing, action);
				return after === null ? [] : [`${write(standing)} ${action} ${write(after)}`];
			})
		);
		expect(moves).toEqual([
			'draft submit in-review',
			'in-review return draft',
			'in-review approve in-review',
			'in-review publish published',
			'published approve published',
			'published retire retired',
			'published+draft submit published+in-review',
			'published+draft retire retired',
			'published+in-review return published+draft',
			'published+in-review approve published+in-review',
			'published+in-review publish published',
			'published+in-review retire retired'
		]);
	});
});

describe('standingAfterEdit', () => {
	it('leaves what is published published, and makes anything else a draft', () => {
		expect(STANDINGS.map((standing) => write(standingAfterEdit(standing)))).toEqual([
			'draft',
			'draft',
			'published+draft',
			'published+draft',
			'published+draft',
			'draft'
		]);
	});
});

describe('sayWhyNot', () => {
	it('speaks of the newest text, not of the one that readers see', () => {
		expect(sayWhyNot({ state: 'published', draft: 'draft' }, 'publish')).toBe(
			'It is a draft: submit it for review first.'
		);
		expect(sayWhyNot({ state: 'published', draft: null }, 'publish')).toContain('published already');
		expect(sayWhyNot({ state: 'in-review', draft: null }, 'retire')).toBe(
			'It is in review: only a published one is retired.'
		);
	});
});

describe('nextReview', () => {
	it('counts days across a change of clocks in UTC', () => {
		expect(nextReview('2026-03-20T10:00:00.000Z', 30)).toBe('2026-04-19T10:00:00.000Z');
	});
});
