/**
 * The path inside this application to which `?next=` leads; `/` for anything else. The whole address is
 * compared: a path that begins with two slashes would lead to another host.
 */
export function readNextPath(url: URL): string {
	const next = url.searchParams.get('next') ?? '/';
	if (!next.startsWith('/') || !URL.canParse(next, url)) return '/';
	const target = new URL(next, url);
	return target.origin === url.origin ? target.pathname + target.search : '/';
}
