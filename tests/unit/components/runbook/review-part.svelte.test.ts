import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import type { ComponentProps } from 'svelte';
import ReviewPart from '../../../../src/routes/(app)/runbooks/[slug]/ReviewPart.svelte';

type Props = ComponentProps<typeof ReviewPart>;

const NOTHING = { edit: false, submit: false, return: false, approve: false, publish: false, retire: false };

function propsOf(work: Partial<Props['work']>, rest: Partial<Props> = {}): Props {
	return {
		slug: 'vacuum',
		shown: 2,
		failure: null,
		...rest,
		work: {
			revision: 2,
			state: 'in-review',
			publishedRevision: 1,
			author: { id: 7, name: 'Ines' },
			events: [
				{ action: 'submit', by: { id: 7, name: 'Ines' }, at: '2026-03-02T02:10:00.000Z', note: 'step 3' }
			],
			approval: null,
			reasons: ['Revision 2 is not approved yet.', 'There is no way back.'],
			may: NOTHING,
			...work
		}
	};
}

describe('ReviewPart', () => {
	it('offers a reader no button and none of the open reasons, but tells that a newer text waits', () => {
		render(ReviewPart, propsOf({}, { shown: 1 }));
		expect(screen.queryAllByRole('button')).toEqual([]);
		expect(screen.queryByText(/keep it from being published/)).toBeNull();
		expect(screen.getByText('Revision 2 is in review')).toBeTruthy();
		expect(screen.getByRole('link', { name: 'Read revision 2' })).toBeTruthy();
	});

	it('lets nobody approve a text that is not before them', () => {
		const may = { ...NOTHING, approve: true, return: true };
		const { unmount } = render(ReviewPart, propsOf({ may }, { shown: 1 }));
		expect(screen.queryByRole('button', { name: 'Approve' })).toBeNull();
		expect(screen.getByRole('link', { name: 'Read revision 2 to approve or return it' })).toBeTruthy();
		unmount();
		render(ReviewPart, propsOf({ may }));
		expect(screen.getByText('Approve …')).toBeTruthy();
	});

	it('shows every reason of a refusal', () => {
		const failure = {
			problem: {
				code: 'refused' as const,
				detail: 'It was not published.',
				reasons: ['There is no way back.', 'Step 1 changes production, and no check stands before it.']
			},
			values: { form: 'publish', note: '' }
		};
		render(ReviewPart, propsOf({ may: { ...NOTHING, publish: true } }, { failure }));
		const alert = screen.getByRole('alert');
		expect(alert.textContent).toContain('Not published');
		expect(alert.querySelectorAll('li')).toHaveLength(2);
	});
});
