/** A time of a log line in UTC, and whether its zone had to be guessed. */
export interface LogTime {
	at: string;
	guessedZone: string | null;
}

/** Abbreviations that mean one offset wherever they are used; hours. CST, IST, BST, AST and their like mean several. */
const ZONES: Record<string, number> = {
	UTC: 0,
	GMT: 0,
	Z: 0,
	UCT: 0,
	WET: 0,
	WEST: 1,
	CET: 1,
	CEST: 2,
	EET: 2,
	EEST: 3,
	MSK: 3,
	EST: -5,
	EDT: -4,
	CDT: -5,
	MST: -7,
	MDT: -6,
	PST: -8,
	PDT: -7,
	AKST: -9,
	AKDT: -8,
	HST: -10,
	JST: 9,
	KST: 9,
	HKT: 8,
	AWST: 8,
	ACST: 9.5,
	ACDT: 10.5,
	AEST: 10,
	AEDT: 11,
	NZST: 12,
	NZDT: 13,
	SAST: 2,
	EAT: 3,
	WAT: 1,
	PKT: 5,
	WIB: 7
};

const STAMP =
	/^(\d{4}-\d\d-\d\d) (\d\d:\d\d:\d\d)(\.\d+)?(?: ?([A-Za-z]{1,5})| ?([+-])(\d\d)(?::?(\d\d))?)?$/;

/** The time of a log line as RFC 3339 in UTC; null where it is none. A zone of several meanings is taken as UTC. */
export function readLogTime(text: string): LogTime | null {
	const epoch = /^\d{10}\.\d{3}$/.test(text) ? Number(text) * 1000 : null;
	if (epoch !== null) return { at: new Date(epoch).toISOString(), guessedZone: null };
	const match = STAMP.exec(text);
	if (match === null) return null;
	const [, date = '', clock = '', fraction = '', abbreviation, sign, hours = '0', minutes = '0'] = match;
	const local = Date.parse(`${date}T${clock}${fraction.slice(0, 4)}Z`);
	if (Number.isNaN(local)) return null;
	const offset = abbreviation === undefined ? 0 : ZONES[abbreviation.toUpperCase()];
	const shift =
		sign === undefined
			? (offset ?? 0) * 60
			: (Number(hours) * 60 + Number(minutes)) * (sign === '-' ? -1 : 1);
	const guessed = sign === undefined && (abbreviation === undefined || offset === undefined);
	return {
		at: new Date(local - shift * 60_000).toISOString(),
		guessedZone: guessed ? (abbreviation ?? 'no zone') : null
	};
}
