import { redirect } from '@sveltejs/kit';
import { THEME_COOKIE, toTheme } from '$lib/domain/person/theme';
import { receiveForm } from '$lib/server/http/form';
import { unwrap } from '$lib/server/http/respond';
import type { RequestHandler } from './$types';

const YEAR_SECONDS = 31_536_000;

/** Keeps the choice of colours on this device and goes back to where it was made. */
export const POST: RequestHandler = async ({ request, cookies, url }) => {
	const form = unwrap(await receiveForm(request));
	cookies.set(THEME_COOKIE, toTheme(String(form.get('theme') ?? '')), {
		path: '/',
		maxAge: YEAR_SECONDS,
		sameSite: 'lax',
		httpOnly: false,
		secure: url.protocol === 'https:'
	});
	const back = new URL(String(form.get('back') ?? '/'), url);
	// The whole address: a path that begins with two slashes would lead to another host.
	redirect(303, back.origin === url.origin ? back.href : '/');
};
