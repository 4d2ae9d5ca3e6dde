import { beforeEach, describe, expect, it } from 'vitest';
import { forgetRunbook, keepRunbook, readKeptRunbook } from '$lib/state/kept-runbook';

const kept = {
	revision: 3,
	keptAt: '2026-03-02T02:10:00.000Z',
	values: {
		title: 'Index the yard moves',
		summary: '',
		body: '### 1. Look (check)',
		engines: ['postgresql'],
		symptoms: [],
		reviewEveryDays: '90',
		note: ''
	}
};

describe('readKeptRunbook', () => {
	beforeEach(() => localStorage.clear());

	it('finds nothing for another runbook, and nothing in what is no kept text', () => {
		keepRunbook('vacuum', kept);
		expect(readKeptRunbook(null)).toBeNull();
		expect(readKeptRunbook('analyze')).toBeNull();
		localStorage.setItem('catchwater.draft.runbook.vacuum', '{"revision":1,"values":{"title":"x"}}');
		expect(readKeptRunbook('vacuum')).toBeNull();
	});

	it('answers the text with the revision that it was begun from, until it is forgotten', () => {
		expect(keepRunbook('vacuum', kept)).toBe(true);
		expect(readKeptRunbook('vacuum')).toEqual(kept);
		forgetRunbook('vacuum');
		expect(readKeptRunbook('vacuum')).toBeNull();
	});
});
