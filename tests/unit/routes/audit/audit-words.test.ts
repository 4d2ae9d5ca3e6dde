import { describe, expect, it } from 'vitest';
import {
	actionOptions,
	addressOf,
	wordAction,
	wordDetail
} from '../../../../src/routes/(app)/audit/audit-words';

describe('addressOf', () => {
	it('leads nowhere for what has no page and belongs to no incident', () => {
		expect(addressOf({ subject: 'token:3', detail: {} })).toBeNull();
		expect(addressOf({ subject: 'entry:3', detail: { incident: null } })).toBeNull();
	});

	it.each([
		['incident:412', {}, '/incidents/412'],
		['person:3', {}, '/people/3'],
		['runbook:page-by-key', {}, '/runbooks/page-by-key'],
		['entry:9', { incident: 412 }, '/incidents/412']
	])('leads from %s to its page', (subject, detail, address) => {
		expect(addressOf({ subject, detail })).toBe(address);
	});
});

describe('the words of a line', () => {
	it('show an action that has no words as it is', () => {
		expect(wordAction('something.new')).toBe('something.new');
	});

	it('say of each detail what it is, and none where it was empty', () => {
		expect(wordDetail({ from: null, to: 90, fields: ['title', 'state'] })).toBe(
			'from none, to 90, fields title, state'
		);
	});

	it('offer each group before its actions', () => {
		expect(actionOptions(['person.role', 'token.create', 'token.revoke']).map(({ value }) => value)).toEqual([
			'person',
			'person.role',
			'token',
			'token.create',
			'token.revoke'
		]);
	});
});
