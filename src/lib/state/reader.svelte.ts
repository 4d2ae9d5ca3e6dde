import { getContext, setContext } from 'svelte';
import { presentTime } from './present-time';

/**
 * The reader's zone and the present minute. The server knows the zone from a cookie after the first visit; until
 * then it writes UTC and says so. The minute is the server's at first, so that both draw the same page.
 */
export interface Reader {
	/** IANA name, "Europe/Oslo". */
	readonly zone: string;
	/** False: the zone is a guess, and times say UTC. */
	readonly known: boolean;
	/** ISO 8601, moves on once a minute in the browser. */
	readonly now: string;
}

const KEY = Symbol('reader');
const YEAR_SECONDS = 31_536_000;

/** Makes the reader's zone and minute known to every component below; call in the layout. */
export function provideReader(fromServer: () => { zone: string | null; now: string }): void {
	let zone = $state(fromServer().zone);
	let now = $state(fromServer().now);
	setContext<Reader>(KEY, {
		get zone() {
			return zone ?? 'UTC';
		},
		get known() {
			return zone !== null;
		},
		get now() {
			return now;
		}
	});
	$effect(() => {
		const here = Intl.DateTimeFormat().resolvedOptions().timeZone;
		if (here && here !== fromServer().zone) {
			document.cookie = `catchwater_zone=${encodeURIComponent(here)}; path=/; max-age=${YEAR_SECONDS}; samesite=lax`;
			zone = here;
		}
		const tick = () => (now = presentTime());
		tick();
		const timer = setInterval(tick, 60_000);
		return () => clearInterval(timer);
	});
}

/** The reader's zone and minute; UTC and the device's clock outside the application's layout. */
export function useReader(): Reader {
	return getContext<Reader | undefined>(KEY) ?? { zone: 'UTC', known: false, now: presentTime() };
}
