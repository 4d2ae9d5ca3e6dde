/**
 * NIST SP 800-63B-4 section 3.1.1.2: at least 15 characters where the password is the only factor, counted as
 * code points after normalisation; at least 64 must be taken; no rules of composition, no forced change.
 */
export const PASSWORD_MIN_LENGTH = 15;
export const PASSWORD_MAX_LENGTH = 200;

/** What is left of a password when the words that guessing starts with are taken out must be longer than this. */
const LEAST_OWN_CHARACTERS = 6;
const LEAST_DIFFERENT_CHARACTERS = 5;

/** The stems of the commonest passwords. Common practice, no source. */
const COMMON_WORDS = [
	'password',
	'passw0rd',
	'passwort',
	'passphrase',
	'qwertyuiop',
	'qwertzuiop',
	'asdfghjkl',
	'zxcvbnm',
	'qwerty',
	'qwertz',
	'azerty',
	'1q2w3e4r5t',
	'1qaz2wsx3edc',
	'1q2w3e4r',
	'1qaz2wsx',
	'abcdefghijklmnopqrstuvwxyz',
	'abcdefgh',
	'abcdef',
	'abc123',
	'letmein',
	'welcome',
	'administrator',
	'admin',
	'iloveyou',
	'sunshine',
	'princess',
	'football',
	'baseball',
	'monkey',
	'dragon',
	'master',
	'superman',
	'batman',
	'shadow',
	'whatever',
	'trustno1',
	'secret',
	'changeme',
	'default',
	'database',
	'postgresql',
	'postgres',
	'mariadb',
	'mysql',
	'catchwater',
	'january',
	'february',
	'april',
	'august',
	'september',
	'october',
	'november',
	'december',
	'spring',
	'summer',
	'autumn',
	'winter',
	'monday',
	'friday'
];
const DIGIT_RUNS = /0?123456789?0?|9?8?7654321|12345|(19|20)\d\d/g;

/** How a password is compared and hashed: one form for what looks the same on every keyboard. */
export function normalisePassword(password: string): string {
	return password.normalize('NFC');
}

/** The words of a name and an address that somebody who knows the person would try first. */
function wordsOf(person: { name: string; email: string }): string[] {
	return `${person.name} ${person.email}`
		.toLowerCase()
		.split(/[^\p{L}\p{N}]+/u)
		.filter((word) => word.length >= 3);
}

/** Whether the whole is a short piece said again and again: `abcabcabcabcabc`. */
function isRepetition(text: string): boolean {
	return /^(.{1,5}?)\1+.{0,4}$/su.test(text);
}

/** What is wrong with a new password and what to do about it; null where it will do. */
export function findPasswordFault(password: string, person: { name: string; email: string }): string | null {
	const normal = normalisePassword(password);
	const length = [...normal].length;
	if (length < PASSWORD_MIN_LENGTH) {
		return `Take at least ${PASSWORD_MIN_LENGTH} characters (this has ${length}): a few words in a row are easy to keep in mind.`;
	}
	if (length > PASSWORD_MAX_LENGTH) return `Take at most ${PASSWORD_MAX_LENGTH} characters.`;
	let own = normal.toLowerCase();
	if (isRepetition(own) || new Set(own).size < LEAST_DIFFERENT_CHARACTERS) {
		return 'This repeats itself, which is among the first things tried. Take other words.';
	}
	for (const word of [...wordsOf(person), ...COMMON_WORDS]) own = own.replaceAll(word, '');
	own = own.replace(DIGIT_RUNS, '').replace(/[\s\p{P}\p{S}]/gu, '');
	if ([...own].length < LEAST_OWN_CHARACTERS) {
		return 'This is made of your name or of words that are tried first. Take other words.';
	}
	return null;
}
