import { parse, YAMLParseError } from 'yaml';
import type { Outcome } from '../problem';
import { fail, ok } from '../problem';

/** A Markdown file taken apart: what stands between the two `---` lines as data, and the text after them. */
export interface FrontMatter {
	data: unknown;
	body: string;
}

const FENCE = /^---[ \t]*\r?\n([\s\S]*?)\r?\n---[ \t]*(?:\r?\n|$)/;

/**
 * Splits front matter from the body and reads it as YAML data: no tags, no code, no anchors resolved more than
 * a hundred times. A file without front matter has `data: null`.
 */
export function readFrontMatter(markdown: string): Outcome<FrontMatter> {
	const text = markdown.replace(/^\uFEFF/, '');
	const found = FENCE.exec(text);
	if (found === null) return ok({ data: null, body: text.trim() });
	try {
		const data: unknown = parse(found[1] ?? '', { maxAliasCount: 100, schema: 'core' });
		return ok({ data, body: text.slice(found[0].length).trim() });
	} catch (error) {
		// A mistake in the YAML, or too many aliases: the file's fault, not ours.
		if (error instanceof YAMLParseError || error instanceof ReferenceError) {
			return fail('invalid', `The front matter is not YAML: ${error.message.split('\n')[0] ?? ''}`);
		}
		throw error;
	}
}
