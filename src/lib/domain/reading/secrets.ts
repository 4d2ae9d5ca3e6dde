/** What takes the place of a likely secret. */
export const MASKED = '[masked]';

const NAMES =
	'(?:[\\w-]{0,40}(?:password|passwd|passphrase|secret|secret[_-]key|api[_-]?key|access[_-]?key|private[_-]?key|' +
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

/** What a secret looks like, and what every text that holds one holds: looked for first, for most hold nothing. */
interface Rule {
	trigger: string | RegExp;
	pattern: RegExp;
	replacement: string | ((all: string, name: string, value: string) => string);
}

const RULES: readonly Rule[] = [
	{
		trigger: '-----BEGIN',
		pattern: /-----BEGIN [A-Z ]*PRIVATE KEY-----[^]*?(?:-----END [A-Z ]*PRIVATE KEY-----|$)/g,
		replacement: MASKED
	},
	{
		trigger: '://',
		// A password may hold an @ of its own: everything up to the last one before the host.
		pattern: /\b([a-z][a-z0-9+.-]{0,30}:\/\/)[^\s"'<>/]{0,256}:[^\s"'<>]{0,256}@(?=[\w.[-])/gi,
		replacement: `$1${MASKED}@`
	},
	{
		trigger: /authorization/i,
		pattern:
			/\b(authorization["']?\s*[:=]\s*["']?)(?!\[masked\])(?:(?:bearer|basic|digest|token)\s+)?[^\s"',;[]+/gi,
		replacement: `$1${MASKED}`
	},
	{
		trigger: /\b(?:bearer|basic) /i,
		pattern: /\b(bearer|basic)\s+[\w.~+/=-]{8,}/gi,
		replacement: `$1 ${MASKED}`
	},
	{ trigger: /pass|pwd|secret|token|key[^"\w]/i, pattern: NAMED, replacement: maskNamed },
	{ trigger: 'eyJ', pattern: /\beyJ[\w-]{5,}\.[\w-]{5,}(?:\.[\w-]*)?/g, replacement: MASKED },
	{
		trigger: /AKIA|ASIA|gh[pousr]_|xox|[sr]k[_-]|cw_/,
		pattern:
			/\b(?:AKIA|ASIA)[0-9A-Z]{16}\b|\bgh[pousr]_\w{20,}|\bxox[a-z]-[\w-]{10,}|\b[sr]k[_-](?:live|test|proj)?[\w-]{16,}|\bcw_\w{16,}/g,
		replacement: MASKED
	},
	{
		trigger: '@',
		pattern: /(?<![\w.%+-])[\w.%+-]{1,128}@(?:[\w-]{1,63}\.){1,8}[a-z]{2,}\b/gi,
		replacement: MASKED
	}
];

/** The rules of addresses, also used where other words can't be secrets. */
const ADDRESSES: readonly Rule[] = [
	{
		trigger: /\d\.\d{1,3}\.\d/,
		pattern: /(?<![\d.])(?:(?:25[0-5]|2[0-4]\d|1?\d?\d)\.){3}(?:25[0-5]|2[0-4]\d|1?\d?\d)(?![\d.])/g,
		replacement: MASKED
	},
	{
		trigger: /:[\da-f]{1,4}:[\da-f]{1,4}:/i,
		pattern: /(?<![\w:])(?:[\da-f]{1,4}:){4,7}[\da-f]{1,4}(?![\w:])/gi,
		replacement: MASKED
	},
	{
		trigger: '::',
		pattern: /(?<![\w:])(?:[\da-f]{1,4}:){1,6}(?::[\da-f]{1,4}){1,6}(?![\w:])/gi,
		replacement: MASKED
	}
];
const ALL = [...RULES, ...ADDRESSES];

/** Whatever a rule may find holds one of these: one look instead of one for each rule. */
const SUSPECT =
	/@|:\/\/|pass|pwd|secret|token|key[^"\w]|authorization|bearer |basic |-----B|eyJ|AKIA|ASIA|gh[pousr]_|xox|[sr]k[_-]|cw_|\d\.\d{1,3}\.\d|::|:[\da-f]{1,4}:[\da-f]{1,4}:/i;
const SUSPECT_ADDRESS = /\d\.\d{1,3}\.\d|::|:[\da-f]{1,4}:[\da-f]{1,4}:/i;

function maskNamed(_all: string, name: string, value: string): string {
	const quote = /^["']/.exec(value)?.[0] ?? '';
	return `${name}${quote}${MASKED}${quote}`;
}

const PASSES = 6;

function applyRules(rules: readonly Rule[], text: string): string {
	let masked = text;
	for (const { trigger, pattern, replacement } of rules) {
		if (typeof trigger === 'string' ? !masked.includes(trigger) : !trigger.test(masked)) continue;
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
		const next = applyRules(ALL, masked);
		if (next === masked) break;
		masked = next;
	}
	return masked;
}

/** IP addresses alone become `[masked]`. */
export function maskAddresses(text: string): string {
	return SUSPECT_ADDRESS.test(text) ? applyRules(ADDRESSES, text) : text;
}
