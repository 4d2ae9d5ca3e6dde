import type { Handle } from '@sveltejs/kit';
import { THEME_COOKIE, toTheme } from '$lib/domain/person/theme';

/**
 * Writes this device's choice of colours into the page before it leaves, so that the first paint is right
 * without an inline script; asks the browser to fetch the text face at once, so that nothing moves when it comes.
 */
export const theme: Handle = ({ event, resolve }) =>
	resolve(event, {
		transformPageChunk: ({ html }) => html.replace('%theme%', toTheme(event.cookies.get(THEME_COOKIE))),
		preload: ({ type, path }) =>
			type === 'js' ||
			type === 'css' ||
			(type === 'font' && /atkinson-hyperlegible-latin-(400|700)-normal/.test(path))
	});
