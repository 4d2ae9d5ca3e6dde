/** A mail's state in a few words. */
export function wordState(mail: { state: string; failure: string | null }): string {
	switch (mail.state) {
		case 'kept':
			return 'lies here';
		case 'sent':
			return 'sent';
		case 'failed':
			return `given up: ${mail.failure ?? 'it could not be sent'}`;
		default:
			return mail.failure === null ? 'on its way' : `waits: ${mail.failure}`;
	}
}

/** A piece of a mail's text; with an address where it is a link into this installation. */
export interface TextPiece {
	text: string;
	href: string | null;
}

/** Cuts a text at the links of one origin; any other address stays plain text. */
export function cutAtLinks(text: string, origin: string): TextPiece[] {
	return text
		.split(/(https?:\/\/\S+)/)
		.filter((piece) => piece !== '')
		.map((piece) => ({
			text: piece,
			href: URL.canParse(piece) && new URL(piece).origin === origin ? piece : null
		}));
}
