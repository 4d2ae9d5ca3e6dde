/** What takes the place of a likely secret. */
export const MASKED = '[masked]';

/** Whatever may hold one of the patterns below holds one of these. */
const SUSPECT =
	/@|:\/\/|pass|pwd|secret|token|key|auth|bearer|basic|-----BEGIN|eyJ|AKIA|\d\.\d{1,3}\.\d|[\da-f]:[\da-f]{0,4}:|gh[pousr]_|xox[a-z]-|cw_/i;

const NAMES =
	'(?:[\\w-]*(?:password|passwd|passphrase|secret|secret[_-]key|api[_-]?key|access[_-]?key|private[_-]?key|' +
	'auth[_-]?token|access[_-]?token|refresh[_-]?token|sslpassword)|pwd|token)';
/** A name, `=` or `:`, and a value that is neither a parameter nor masked; `a = b` of two columns is none. */
const NAMED = new RegExp(
	`\\b(${NAMES}["']?(?:\\s*:\\s*|=|\\s*=\\s*(?=["'])))(?!["']?(?:[?$]|\\[masked\\]))` +
		`("[^"\\n]*"|'[^'\\n]*'|[^\\s"',;)}\\]]+)`,
	'gi'
);

const NAME = new RegExp(`^${NAMES}$`, 'i');

/** Whether a key names a secret, so that its value is one whatever it looks like. */
export function isSecretName(key: string): boolean {
	return NAME.test(key);
}

type Replacement = string | ((all: string, name: string, value: string) => string);

const RULES: readonly [RegExp, Replacement][] = [
	[/-----BEGIN [A-Z ]*PRIVATE KEY-----[^]*?(?:-----END [A-Z ]*PRIVATE KEY-----|$)/g, MASKED],
	// A password may hold an @ of its own: everything up to the last one before the host.
	[/\b([a-z][a-z0-9+.-]*:\/\/)[^\s"'<>/]*:[^\s"'<>]*@(?=[\w.[-])/gi, `$1${MASKED}@`],
	[
		/\b(authorization["']?\s*[:=]\s*["']?)(?!\[masked\])(?:(?:bearer|basic|digest|token)\s+)?[^\s"',;[]+/gi,
		`$1${MASKED}`
	],
	[/\b(bearer|basic)\s+[\w.~+/=-]{8,}/gi, `$1 ${MASKED}`],
	[NAMED, maskNamed],
	[/\beyJ[\w-]{5,}\.[\w-]{5,}(?:\.[\w-]*)?/g, MASKED],
	[
		/\b(?:AKIA|ASIA)[0-9A-Z]{16}\b|\bgh[pousr]_\w{20,}|\bxox[a-z]-[\w-]{10,}|\b[sr]k[_-](?:live|test|proj)?[\w-]{16,}|\bcw_\w{16,}/g,
		MASKED
	],
	[/[\w.%+-]+@(?:[\w-]+\.)+[a-z]{2,}\b/gi, MASKED],
	[/(?<![\d.])(?:(?:25[0-5]|2[0-4]\d|1?\d?\d)\.){3}(?:25[0-5]|2[0-4]\d|1?\d?\d)(?![\d.])/g, MASKED],
	[/(?<![\w:])(?:[\da-f]{1,4}:){4,7}[\da-f]{1,4}(?![\w:])/gi, MASKED],
	[/(?<![\w:])(?:[\da-f]{1,4}:){1,6}(?::[\da-f]{1,4}){1,6}(?![\w:])/gi, MASKED]
];

/** The rules of addresses alone, for places where other words can't be secrets. */
const ADDRESSES = RULES.slice(-3);

function maskNamed(_all: string, name: string, value: string): string {
	const quote = /^["']/.exec(value)?.[0] ?? '';
	return `${name}${quote}${MASKED}${quote}`;
}

const PASSES = 6;

function applyRules(text: string): string {
	let masked = text;
	for (const [pattern, replacement] of RULES) {
		masked =
			typeof replacement === 'string'
				? masked.replace(pattern, replacement)
				: masked.replace(pattern, replacement);
	}
	return masked;
}

/**
 * Likely secrets become `[masked]`: passwords in connection strings and settings, tokens, private keys, e-mail and IP
 * addresses. A guess by shape (common practice, no source): what it can't see must not be pasted.
 */
export function maskSecrets(text: string): string {
	if (!SUSPECT.test(text)) return text;
	let masked = text;
	// What one rule takes away may lay bare the shape that another looks for.
	for (let pass = 0; pass < PASSES; pass++) {
		const next = applyRules(masked);
		if (next === masked) break;
		masked = next;
	}
	return masked;
}

/** IP addresses alone become `[masked]`. */
export function maskAddresses(text: string): string {
	if (!/\d\.\d{1,3}\.\d|[\da-f]:[\da-f]{0,4}:[\da-f:]/i.test(text)) return text;
	let masked = text;
	for (const [pattern] of ADDRESSES) masked = masked.replace(pattern, MASKED);
	return masked;
}
