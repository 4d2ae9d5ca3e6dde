const SCHEMES = new Set(['http:', 'https:', 'mailto:']);

/** What browsers drop inside an address, so that "java\nscript:" is one scheme: controls, white space, marks. */
const IGNORED = /[\p{Cc}\p{Cf}\p{Zs}\p{Zl}\p{Zp}]/gu;

/**
 * The address of a link as it may be followed, or null: only pages of our own (`/runbooks/…`, `#step-2`),
 * http, https and mailto.
 */
export function allowLink(href: string): string | null {
	const address = href.replace(IGNORED, '');
	if (/^#[\w-]+$/.test(address)) return address;
	// "//host" and "/\host" leave this site.
	if (/^\/(?![/\\])/.test(address)) return address;
	const scheme = /^[a-z][a-z0-9+.-]*:/i.exec(address)?.[0].toLowerCase();
	return scheme !== undefined && SCHEMES.has(scheme) ? address : null;
}
