import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { markdownKeymap, markdownLanguage } from '@codemirror/lang-markdown';
import { PostgreSQL } from '@codemirror/lang-sql';
import { HighlightStyle, Language, syntaxHighlighting } from '@codemirror/language';
import { EditorState } from '@codemirror/state';
import { EditorView, keymap, lineNumbers } from '@codemirror/view';
import { tags } from '@lezer/highlight';
import { MarkdownParser, parseCode } from '@lezer/markdown';

/** An editor that stands in the page. */
export interface OpenedEditor {
	/** Puts another text in its place. */
	replace(text: string): void;
	focus(): void;
	close(): void;
}

interface Options {
	host: HTMLElement;
	text: string;
	/** Attributes of the element that one types in: its name, its description, whether it is invalid. */
	attributes: Record<string, string>;
	/** Of the page's content-security-policy; lets the editor's own style in. */
	nonce: string;
	onChange: (text: string) => void;
	/** Ctrl+S, or Command+S. */
	onSave: () => void;
}

const look = EditorView.theme({
	'&': { backgroundColor: 'var(--sheet)', color: 'var(--ink)', fontSize: 'var(--size-small)' },
	'&.cm-focused': { outline: '3px solid var(--water)', outlineOffset: '2px' },
	'.cm-scroller': { fontFamily: 'var(--font-mono)', lineHeight: '1.5' },
	'.cm-content': { caretColor: 'var(--ink)', padding: '0.5rem 0', minHeight: '24rem' },
	'.cm-gutters': { backgroundColor: 'var(--silt)', color: 'var(--ink2)', border: 'none' }
});

const words = HighlightStyle.define([
	{ tag: tags.heading, fontWeight: '700', color: 'var(--deep)' },
	{ tag: tags.strong, fontWeight: '700' },
	{ tag: tags.emphasis, fontStyle: 'italic' },
	{ tag: [tags.link, tags.url], color: 'var(--water)', textDecoration: 'underline' },
	{ tag: [tags.quote, tags.comment], color: 'var(--amber)' },
	{ tag: tags.keyword, color: 'var(--iris)', fontWeight: '700' },
	{ tag: [tags.string, tags.number], color: 'var(--moss)' },
	{ tag: [tags.processingInstruction, tags.monospace, tags.meta], color: 'var(--ink2)' }
]);

/**
 * Markdown whose sql blocks are read as PostgreSQL. Put together here and not by the package's own function, which
 * brings readers of HTML, CSS and JavaScript along: more than all the rest of the page.
 */
function markdownWithSql(): Language {
	const { data, parser } = markdownLanguage;
	if (!(parser instanceof MarkdownParser)) return markdownLanguage;
	const codeParser = (info: string) => (/^sql\b/i.test(info) ? PostgreSQL.language.parser : null);
	return new Language(data, parser.configure(parseCode({ codeParser })), [], 'markdown');
}

/** Opens an editor for Markdown with statements in it. Tab leaves it, as it leaves any field. */
export function openEditor({ host, text, attributes, nonce, onChange, onSave }: Options): OpenedEditor {
	const view = new EditorView({
		parent: host,
		state: EditorState.create({
			doc: text,
			extensions: [
				EditorView.cspNonce.of(nonce),
				lineNumbers(),
				history(),
				EditorView.lineWrapping,
				markdownWithSql(),
				syntaxHighlighting(words),
				look,
				EditorView.contentAttributes.of({ spellcheck: 'true', ...attributes }),
				keymap.of([
					{
						key: 'Mod-s',
						run: () => {
							onSave();
							return true;
						}
					},
					...markdownKeymap,
					...defaultKeymap,
					...historyKeymap
				]),
				EditorView.updateListener.of((update) => {
					if (update.docChanged) onChange(update.state.doc.toString());
				})
			]
		})
	});
	return {
		replace: (next) => {
			if (next !== view.state.doc.toString())
				view.dispatch({ changes: { from: 0, to: view.state.doc.length, insert: next } });
		},
		focus: () => view.focus(),
		close: () => view.destroy()
	};
}
