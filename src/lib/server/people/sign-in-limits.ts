import { isIPv6 } from 'node:net';
import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import { hashSecret } from '../secrets';

const WINDOW_SECONDS = 15 * 60;
/** Wrong passwords for one person from one address. A stranger elsewhere doesn't use them up. */
const TRIES_PER_PERSON = 8;
/** Wrong passwords, or unknown tokens, from one address whoever is tried. */
const TRIES_PER_ADDRESS = 60;

const perPerson = new RateLimiterMemory({
	keyPrefix: 'person',
	points: TRIES_PER_PERSON,
	duration: WINDOW_SECONDS
});
const perAddress = new RateLimiterMemory({
	keyPrefix: 'address',
	points: TRIES_PER_ADDRESS,
	duration: WINDOW_SECONDS
});
const tokenGuesses = new RateLimiterMemory({
	keyPrefix: 'token',
	points: TRIES_PER_ADDRESS,
	duration: WINDOW_SECONDS
});
/** Wishes for a new password from one address: each may send a mail to somebody. */
const resets = new RateLimiterMemory({ keyPrefix: 'reset', points: 10, duration: WINDOW_SECONDS });
/** Codes tried for the first administrator, from one address. */
const firstTries = new RateLimiterMemory({ keyPrefix: 'first', points: 20, duration: WINDOW_SECONDS });

/** The eight groups of an IPv6 address, `::` written out. */
function expandIPv6(address: string): string[] {
	const [head = '', tail] = address.split('::');
	const before = head === '' ? [] : head.split(':');
	if (tail === undefined) return before;
	const after = tail === '' ? [] : tail.split(':');
	return [...before, ...Array<string>(8 - before.length - after.length).fill('0'), ...after];
}

/** One household or server has a whole /64 of IPv6: its first four groups count as one address. */
function toNetwork(address: string): string {
	// An IPv4 address in IPv6 dress ends in dots.
	if (!isIPv6(address) || address.includes('.')) return address;
	return expandIPv6(address)
		.slice(0, 4)
		.map((group) => Number.parseInt(group, 16).toString(16))
		.join(':');
}

function personKey(email: string, address: string): string {
	return hashSecret(`${toNetwork(address)} ${email}`);
}

/** Uses up one try; a Problem with the seconds to wait where there are none left. */
async function consume(limiter: RateLimiterMemory, key: string): Promise<Outcome<null>> {
	try {
		await limiter.consume(key);
		return ok(null);
	} catch (refusal) {
		// The limiter says "too many" by throwing its result.
		if (!(refusal instanceof RateLimiterRes)) throw refusal;
		const retryAfterSeconds = Math.max(1, Math.ceil(refusal.msBeforeNext / 1000));
		const minutes = Math.ceil(retryAfterSeconds / 60);
		return fail('rate_limited', `Too many tries. Wait ${minutes} min, then try again.`, {
			retryAfterSeconds
		});
	}
}

/** Counts a try to sign in before the password is looked at, so that many at once gain nothing. */
export async function countSignIn(email: string, address: string): Promise<Outcome<null>> {
	const byAddress = await consume(perAddress, toNetwork(address));
	return byAddress.ok ? consume(perPerson, personKey(email, address)) : byAddress;
}

/** Gives the tries back after a right password: only wrong ones count. */
export async function forgetSignIn(email: string, address: string): Promise<void> {
	await perAddress.reward(toNetwork(address));
	await perPerson.delete(personKey(email, address));
}

/** Counts an unknown token from an address. */
export function countTokenGuess(address: string): Promise<Outcome<null>> {
	return consume(tokenGuesses, toNetwork(address));
}

/** Seconds until tokens from this address are looked at again; null: at once. */
export async function tokenWaitSeconds(address: string): Promise<number | null> {
	const state = await tokenGuesses.get(toNetwork(address));
	if (!state || state.consumedPoints <= TRIES_PER_ADDRESS) return null;
	return Math.max(1, Math.ceil(state.msBeforeNext / 1000));
}

/** Counts a wish for a new password. By address alone: a limit by person could be used up by a stranger. */
export function countReset(address: string): Promise<Outcome<null>> {
	return consume(resets, toNetwork(address));
}

/** Counts a try to become the first administrator. */
export function countFirstTry(address: string): Promise<Outcome<null>> {
	return consume(firstTries, toNetwork(address));
}
