import { Marked, type Token } from 'marked';

/**
 * The links of a text that stay in Catchwater, once each, in order: addresses that begin with one slash
 * (`/incidents/12`), and places of the text itself (`#step-2`). Links in statements and code are none.
 */
export function listOwnLinks(markdown: string): string[] {
	const found = new Set<string>();
	const marked = new Marked({ gfm: true, async: false });
	const collect = (token: Token) => {
		if (token.type !== 'link' || typeof token.href !== 'string') return;
		if (/^(\/(?![/\\])|#)/.test(token.href)) found.add(token.href);
	};
	marked.walkTokens(marked.lexer(markdown), (token) => {
		collect(token);
	});
	return [...found];
}

/** Where an address of our own leads, as far as that can be a dead end. */
export type OwnTarget =
	| { kind: 'incident'; number: string }
	| { kind: 'runbook'; slug: string }
	| { kind: 'symptom'; id: string }
	| { kind: 'step'; number: number };

const KINDS = {
	incidents: (name: string): OwnTarget => ({ kind: 'incident', number: name }),
	runbooks: (name: string): OwnTarget => ({ kind: 'runbook', slug: name }),
	symptoms: (name: string): OwnTarget => ({ kind: 'symptom', id: name })
};

/** What an address names; null: a list, a form or a place that is always there. */
export function targetOf(href: string): OwnTarget | null {
	const step = /^#step-(\d+)$/.exec(href)?.[1];
	if (step !== undefined) return { kind: 'step', number: Number(step) };
	const found = /^\/(incidents|runbooks|symptoms)\/([^/?#]+)/.exec(href);
	const name = found?.[2];
	if (found === null || name === undefined || name === 'new') return null;
	return KINDS[found[1] as keyof typeof KINDS](decodePart(name));
}

function decodePart(text: string): string {
	try {
		return decodeURIComponent(text);
	} catch (error) {
		// A lone % is no escape: the address is taken as it stands.
		if (error instanceof URIError) return text;
		throw error;
	}
}
