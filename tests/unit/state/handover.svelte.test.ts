import { afterEach, describe, expect, it } from 'vitest';
import { leaveHandover, takeHandover } from '$lib/state/handover';

afterEach(() => {
	takeHandover();
});

describe('takeHandover', () => {
	it('has nothing where nothing was left', () => {
		expect(takeHandover()).toBeNull();
	});

	it('gives what was left once, files and texts', () => {
		const file = new File(['plan'], 'plan.txt');
		leaveHandover({
			pieces: [
				{ name: 'plan.txt', content: file },
				{ name: 'pasted.txt', content: 'Sort' }
			]
		});
		expect(takeHandover()?.pieces).toEqual([
			{ name: 'plan.txt', content: file },
			{ name: 'pasted.txt', content: 'Sort' }
		]);
		expect(takeHandover()).toBeNull();
	});

	it('keeps texts in the session, where a full page load finds them', () => {
		leaveHandover({ pieces: [{ name: 'pasted.txt', content: 'Sort' }] });
		expect(sessionStorage.getItem('catchwater.handover')).toBe('[{"name":"pasted.txt","content":"Sort"}]');
	});

	it('does not keep in the session what would not fit there', () => {
		leaveHandover({ pieces: [{ name: 'long.log', content: 'x'.repeat(2_000_001) }] });
		expect(sessionStorage.length).toBe(0);
		expect(takeHandover()?.pieces).toHaveLength(1);
	});
});
