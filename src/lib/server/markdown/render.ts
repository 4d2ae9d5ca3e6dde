import createDOMPurify, { type DOMPurify } from 'dompurify';
import { JSDOM } from 'jsdom';
import { Marked, type RendererObject, type Tokens } from 'marked';
import { allowLink } from './links';

/** What Markdown itself can make, and nothing else: no scripts, styles, frames, forms, images, ids or classes. */
const TAGS = [
	...['p', 'br', 'hr', 'blockquote', 'ul', 'ol', 'li', 'pre', 'code', 'em', 'strong', 'del', 'a'],
	...['h1', 'h2', 'h3', 'h4', 'h5', 'h6', 'table', 'thead', 'tbody', 'tr', 'th', 'td']
];
const ATTRIBUTES = ['href', 'title', 'rel', 'start', 'align'];

/** Rendered texts kept, by how they were asked for: pages show the same ones again and again. */
const KEPT = 500;
const kept = new Map<string, string>();

export interface RenderOptions {
	/** Level that the highest heading of the text gets; 3 stands under a page's section. */
	topHeading?: number;
}

/**
 * Markdown as HTML that may stand in a page: raw HTML is shown as the text that it is, links go only where
 * links.ts allows, images become their description, headings keep their order from `topHeading` on. The result
 * has been through DOMPurify, whatever the renderer did.
 */
export function render(markdown: string, options: RenderOptions = {}): string {
	const top = options.topHeading ?? 3;
	const key = `${top} ${markdown}`;
	const known = kept.get(key);
	if (known !== undefined) return known;
	const html = sanitise(toHtml(markdown, top));
	if (kept.size >= KEPT) kept.delete(kept.keys().next().value ?? '');
	kept.set(key, html);
	return html;
}

function toHtml(markdown: string, top: number): string {
	const marked = new Marked({ gfm: true, breaks: false, async: false });
	const tokens = marked.lexer(markdown);
	const highest = Math.min(
		6,
		...tokens.flatMap((token) => (token.type === 'heading' ? [(token as Tokens.Heading).depth] : []))
	);
	marked.use({ renderer: rendererWith(top - highest) });
	return marked.parser(tokens);
}

function rendererWith(shift: number): RendererObject {
	return {
		heading({ tokens, depth }) {
			const level = Math.min(6, Math.max(1, depth + shift));
			return `<h${level}>${this.parser.parseInline(tokens)}</h${level}>\n`;
		},
		html({ text, block }) {
			return block === true ? `<p>${escapeHtml(text.trim())}</p>\n` : escapeHtml(text);
		},
		image({ text, title }) {
			return escapeHtml(text || title || '');
		},
		link({ href, title, tokens }) {
			const address = allowLink(href);
			const inner = this.parser.parseInline(tokens);
			if (address === null) return inner;
			const named = title ? ` title="${escapeHtml(title)}"` : '';
			return `<a href="${escapeHtml(address)}"${named} rel="noopener noreferrer nofollow">${inner}</a>`;
		},
		checkbox({ checked }) {
			return checked ? '[x] ' : '[ ] ';
		}
	};
}

const ENTITIES: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	"'": '&#39;'
};

function escapeHtml(text: string): string {
	return text.replace(/[&<>"']/g, (character) => ENTITIES[character] ?? character);
}

let purifier: DOMPurify | null = null;

/** The sanitiser over the one DOM of this process. */
function sanitise(html: string): string {
	purifier ??= createDOMPurify(new JSDOM('').window);
	return purifier.sanitize(html, {
		ALLOWED_TAGS: TAGS,
		ALLOWED_ATTR: ATTRIBUTES,
		ALLOW_DATA_ATTR: false,
		ALLOW_ARIA_ATTR: false
	});
}
