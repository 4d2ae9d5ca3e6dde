import { describe, expect, it } from 'vitest';
import { readFrontMatter } from '$lib/domain/markdown/front-matter';

describe('readFrontMatter', () => {
	it('refuses what is not YAML, and says so', () => {
		const split = readFrontMatter('---\ntitle: "open\n---\ntext');
		expect(split.ok).toBe(false);
		if (!split.ok) expect(split.problem.detail).toMatch(/^The front matter is not YAML/);
	});

	it('runs nothing: a block marked as code is plain text', () => {
		const split = readFrontMatter('---js\nglobalThis.broken = true\n---\ntext');
		expect(split).toEqual({
			ok: true,
			value: { data: null, body: '---js\nglobalThis.broken = true\n---\ntext' }
		});
		expect(Object.keys(globalThis)).not.toContain('broken');
	});

	it('refuses a bomb of aliases', () => {
		const lines = ['a: &a [x,x,x,x,x,x,x,x,x]'];
		for (let i = 1; i < 9; i++) {
			const before = String.fromCharCode(96 + i);
			lines.push(
				`${String.fromCharCode(97 + i)}: &${String.fromCharCode(97 + i)} [${Array(9).fill(`*${before}`).join(',')}]`
			);
		}
		expect(readFrontMatter(`---\n${lines.join('\n')}\n---\n`).ok).toBe(false);
	});

	it('reads the data and the text after it, with any line ends', () => {
		const split = readFrontMatter(
			'\uFEFF---\r\ntitle: Refresh\r\nsymptoms: [hash-spill]\r\n---\r\n\r\n## Text\r\n'
		);
		expect(split).toEqual({
			ok: true,
			value: { data: { title: 'Refresh', symptoms: ['hash-spill'] }, body: '## Text' }
		});
	});

	it('keeps a time as text, for the schema to read', () => {
		const split = readFrontMatter('---\nstartedAt: 2025-02-01T00:40:00+01:00\n---\n');
		expect(split).toEqual({
			ok: true,
			value: { data: { startedAt: '2025-02-01T00:40:00+01:00' }, body: '' }
		});
	});
});
