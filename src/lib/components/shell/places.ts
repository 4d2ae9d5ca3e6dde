/** The places of the top strip, in their order. */
export const PLACES = [
	{ href: '/', label: 'Watch' },
	{ href: '/incidents', label: 'Incidents' },
	{ href: '/runbooks', label: 'Runbooks' },
	{ href: '/symptoms', label: 'Symptoms' },
	{ href: '/gauge', label: 'Gauge' }
] as const;

/** Whether a path lies in a place: its own page or anything below it. */
export function isIn(place: string, path: string): boolean {
	return place === '/' ? path === '/' : path === place || path.startsWith(`${place}/`);
}
