/** What a file that is no text is, and what would help instead. */
export interface BinaryFile {
	what: string;
	help: string;
}

const PICTURE =
	'Paste the plan as text: a picture can be kept beside an incident, but nothing can be read from it.';
const UNPACK = 'Unpack it and send the file inside.';
const SIGNATURES: readonly (readonly [string, BinaryFile])[] = [
	['89504e47', { what: 'a PNG picture', help: PICTURE }],
	['ffd8ff', { what: 'a JPEG picture', help: PICTURE }],
	['47494638', { what: 'a GIF picture', help: PICTURE }],
	['52494646', { what: 'a WebP picture or a sound', help: PICTURE }],
	['424d', { what: 'a BMP picture', help: PICTURE }],
	['49492a00', { what: 'a TIFF picture', help: PICTURE }],
	['4d4d002a', { what: 'a TIFF picture', help: PICTURE }],
	['25504446', { what: 'a PDF document', help: 'Copy the plan out of it and send it as text.' }],
	['1f8b', { what: 'a gzip archive', help: UNPACK }],
	['504b0304', { what: 'a zip archive or an office document', help: UNPACK }],
	['425a68', { what: 'a bzip2 archive', help: UNPACK }],
	['fd377a585a00', { what: 'an xz archive', help: UNPACK }],
	['28b52ffd', { what: 'a zstd archive', help: UNPACK }],
	['377abcaf271c', { what: 'a 7z archive', help: UNPACK }],
	['53514c69746520666f726d6174', { what: 'an SQLite database', help: 'Send a plan or a log instead.' }],
	['5047444d50', { what: 'a database dump', help: 'Send a plan or a log instead.' }],
	['7f454c46', { what: 'a program', help: 'Send a plan or a log instead.' }]
];

/** What the first bytes of a file that is no text say it is; null for text. */
export function binarySignature(head: Uint8Array): BinaryFile | null {
	let hex = '';
	for (const byte of head.subarray(0, 16)) hex += byte.toString(16).padStart(2, '0');
	for (const [signature, file] of SIGNATURES) {
		// Two letters may also begin a text: BM and a carriage of blanks is none.
		if (hex.startsWith(signature) && (signature.length > 4 || hasControls(head))) return file;
	}
	return hasControls(head) ? { what: 'a file that is no text', help: 'Send a plan or a log as text.' } : null;
}

/** Text holds hardly any control characters but tabs and line ends. */
function hasControls(head: Uint8Array): boolean {
	const sample = head.subarray(0, 4096);
	let controls = 0;
	for (const byte of sample) if (byte < 9 || (byte > 13 && byte < 32 && byte !== 27)) controls++;
	return controls > sample.length / 50 + 1;
}
