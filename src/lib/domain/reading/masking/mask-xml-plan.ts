import { keyOfTag } from '../formats/xml-tags';
import { maskStatement } from '../mask-literals';
import { maskSecrets } from '../secrets';
import { maskTextPlan } from './mask-text-plan';
import { isPlainKey } from './plan-keys';

/** An element that holds text alone; the end of the file may cut it off. */
const LEAF = /<([A-Za-z_][\w.-]*)>([^<]*)(?:<\/\1>|$)/g;

/** An XML plan with its literals masked; layout, tags and figures stay. */
export function maskXmlPlan(text: string): string {
	const start = text.search(/<(?:\?xml|explain|Query|Plan)\b/);
	const above = start <= 0 ? '' : maskTextPlan(text.slice(0, start));
	const document = start <= 0 ? text : text.slice(start);
	const settings = [...document.matchAll(/<Settings>[^]*?(?:<\/Settings>|$)/g)].map(({ index, 0: all }) => [
		index,
		index + all.length
	]);
	const masked = document.replace(LEAF, (all: string, tag: string, content: string, offset: number) => {
		if (content.trim() === '' || isPlainKey(keyOfTag(tag))) return all;
		if (settings.some(([from = 0, to = 0]) => offset > from && offset < to)) return all;
		const value = decode(content);
		const kept = maskStatement(value);
		return kept === value ? all : all.replace(`>${content}`, () => `>${encode(kept)}`);
	});
	return above + maskSecrets(masked);
}

const ENTITIES: Record<string, string> = { lt: '<', gt: '>', amp: '&', quot: '"', apos: "'" };

function decode(text: string): string {
	return text.replace(
		/&(?:#x([\da-f]{1,6})|#(\d{1,7})|(\w+));/gi,
		(all, hex?: string, decimal?: string, name?: string) => {
			const code = hex !== undefined ? parseInt(hex, 16) : decimal !== undefined ? Number(decimal) : null;
			if (code !== null) return code <= 0x10ffff ? String.fromCodePoint(code) : all;
			return ENTITIES[name ?? ''] ?? all;
		}
	);
}

function encode(text: string): string {
	return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;');
}
