import type { Handle } from '@sveltejs/kit';
import { config } from '$lib/server/config';

const ALWAYS: Record<string, string> = {
	'x-content-type-options': 'nosniff',
	'x-frame-options': 'DENY',
	// Not `no-referrer`: with that, browsers send `Origin: null` with our own forms.
	'referrer-policy': 'same-origin',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin',
	'permissions-policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=()'
};

/** Two years, the least that browsers' preload lists take. */
const HSTS = 'max-age=63072000';

/** For answers that are no pages: should one be opened as a document, nothing in it runs or loads. */
const CLOSED_POLICY = "default-src 'none'; frame-ancestors 'none'; sandbox";

/**
 * Lets the editor's own style element in by the page's nonce. Kit adds the nonce to style-src only where the
 * page itself has an inline style. In development it allows every inline style, which a nonce would take back.
 */
function addStyleNonce(policy: string): string {
	if (/style-src [^;]*'unsafe-inline'/.test(policy)) return policy;
	const nonce = /'nonce-[^']+'/.exec(policy)?.[0];
	return nonce ? policy.replace(/style-src (?!.*nonce)([^;]*)/, `style-src $1 ${nonce}`) : policy;
}

/** Sets the headers that keep a browser from doing more with an answer than was meant. */
export const setSecurityHeaders: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	const { headers } = response;
	for (const [name, value] of Object.entries(ALWAYS)) headers.set(name, value);
	if (config().origin.startsWith('https:')) headers.set('strict-transport-security', HSTS);
	const policy = headers.get('content-security-policy');
	if (policy) headers.set('content-security-policy', addStyleNonce(policy));
	else if (!isPage(headers)) headers.set('content-security-policy', CLOSED_POLICY);
	// What one person saw is never kept for the next one on the same machine or proxy.
	if (!headers.has('cache-control')) headers.set('cache-control', 'private, no-store');
	return response;
};

function isPage(headers: Headers): boolean {
	return headers.get('content-type')?.startsWith('text/html') ?? false;
}
