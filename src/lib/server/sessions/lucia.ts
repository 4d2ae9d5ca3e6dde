import { Lucia, TimeSpan } from 'lucia';
import type { Role } from '$lib/domain/person/person';
import { config } from '../config';
import { SESSION_COOKIE } from '../http/credentials';
import { IDLE_MS, sessionAdapter } from './session-adapter';

function makeLucia() {
	return new Lucia(sessionAdapter, {
		sessionExpiresIn: new TimeSpan(IDLE_MS, 'ms'),
		sessionCookie: {
			name: SESSION_COOKIE,
			attributes: {
				sameSite: 'lax',
				path: '/',
				// A Secure cookie never comes back over plain HTTP; on the way out of the house there is HTTPS.
				secure: config().origin.startsWith('https:')
			}
		},
		getSessionAttributes: ({ createdAt, lastSeenAt }) => ({ createdAt, lastSeenAt }),
		getUserAttributes: ({ name, role }) => ({ name, role })
	});
}

let instance: ReturnType<typeof makeLucia> | null = null;

/** The one Lucia of this process. */
export function lucia(): ReturnType<typeof makeLucia> {
	instance ??= makeLucia();
	return instance;
}

declare module 'lucia' {
	interface Register {
		Lucia: ReturnType<typeof makeLucia>;
		UserId: number;
		DatabaseSessionAttributes: { createdAt: string; lastSeenAt: string; userAgent: string | null };
		DatabaseUserAttributes: { name: string; role: Role };
	}
}
