/** Characters that RFC 8187 lets stand in an extended value. */
const PLAIN = /[A-Za-z0-9!#$&+.^_`|~-]/;

function encode(name: string): string {
	return [...Buffer.from(name.toWellFormed(), 'utf8')]
		.map((byte) => {
			const character = String.fromCharCode(byte);
			return byte < 0x80 && PLAIN.test(character)
				? character
				: `%${byte.toString(16).toUpperCase().padStart(2, '0')}`;
		})
		.join('');
}

/**
 * Content-Disposition that makes a browser save a file and never show it (RFC 6266): the name in ASCII for
 * the oldest clients, and whole in UTF-8.
 */
export function attachmentNamed(name: string): string {
	const ascii = name.replaceAll(/[^\x20-\x7e]|["\\%]/g, '_');
	return `attachment; filename="${ascii}"; filename*=UTF-8''${encode(name)}`;
}
