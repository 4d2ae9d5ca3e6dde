/** Whether an address belongs to the API: decides the shape of an error, never who may call. */
export function isApiPath(url: URL): boolean {
	return url.pathname === '/api' || url.pathname.startsWith('/api/');
}
