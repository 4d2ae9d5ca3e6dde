import { describe, expect, it } from 'vitest';
import { overrideConfig } from '$lib/server/config';
import { lucia } from '$lib/server/sessions/lucia';

describe('the session cookie', () => {
	it('is Secure where people come over https', () => {
		overrideConfig({ origin: 'https://catchwater.example.org' });
		const cookie = lucia().createSessionCookie('an-id');
		expect(cookie.name).toBe('catchwater_session');
		expect(cookie.attributes).toMatchObject({ secure: true, httpOnly: true, sameSite: 'lax', path: '/' });
	});
});
