import { describe, expect, it } from 'vitest';
import { listOwnLinks, targetOf } from '$lib/domain/markdown/own-links';

describe('listOwnLinks', () => {
	it('leaves out other sites, code and statements, and finds links in lists, tables and references', () => {
		const text = `[a](/incidents/1) \`[b](/incidents/2)\` [c](https://elsewhere.example/incidents/3) [d](//host/x)

- [e](/runbooks/vacuum#step-2)

| x |
| - |
| [f](/symptoms/hash-spill) |

[g][ref] and again [a](/incidents/1)

\`\`\`sql
select '[h](/incidents/4)';
\`\`\`

[ref]: #step-3
`;
		expect(listOwnLinks(text)).toEqual([
			'/incidents/1',
			'/runbooks/vacuum#step-2',
			'/symptoms/hash-spill',
			'#step-3'
		]);
	});
});

describe('targetOf', () => {
	it.each([
		['/incidents/12?x=1', { kind: 'incident', number: '12' }],
		['/runbooks/vacuum/follow', { kind: 'runbook', slug: 'vacuum' }],
		['/symptoms/hash%2Dspill', { kind: 'symptom', id: 'hash-spill' }],
		['/incidents/100%', { kind: 'incident', number: '100%' }],
		['#step-4', { kind: 'step', number: 4 }],
		['/incidents', null],
		['/incidents/new', null],
		['/gauge', null],
		['#remarks', null]
	])('reads %s', (href, target) => {
		expect(targetOf(href)).toEqual(target);
	});
});
