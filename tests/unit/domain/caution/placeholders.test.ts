import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fillPlaceholders, findPlaceholders, restorePlaceholders } from '$lib/domain/caution/placeholders';

const bytes = (text: string) => new TextEncoder().encode(text).length;

describe('fillPlaceholders', () => {
	it('leaves text without placeholders alone', () => {
		expect(fillPlaceholders("select '{x}', a from t")).toBe("select '{x}', a from t");
	});

	it('puts an identifier of the same length in its place', () => {
		expect(fillPlaceholders('analyze {{schema}}.{{table}}')).toBe('analyze __schema__.__table__');
	});

	it('keeps the length in bytes for any name, so that positions hold in the original', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'grapheme' }), (name) => {
				const text = `analyze {{${name.replace(/[{}\n\ud800-\udfff]/g, '')}}};`;
				expect(bytes(fillPlaceholders(text))).toBe(bytes(text));
			})
		);
	});

	it('is undone by restorePlaceholders', () => {
		const text = 'select {{column name}} from {{Table}} where {{column name}} > 1';
		expect(restorePlaceholders(fillPlaceholders(text), text)).toBe(text);
	});
});

describe('findPlaceholders', () => {
	it('lists each once, in order', () => {
		expect(findPlaceholders('{{b}} {{a}} {{b}}')).toEqual(['{{b}}', '{{a}}']);
	});
});
