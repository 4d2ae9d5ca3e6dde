/** What a spreadsheet would take for a formula (OWASP, CSV Injection). */
const FORMULA = /^[=+\-@\t\r]/;

function toCell(value: string | number | null): string {
	if (value === null) return '';
	if (typeof value === 'number') return String(value);
	const text = FORMULA.test(value) ? `'${value}` : value;
	return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/**
 * One record of CSV (RFC 4180), its line end included. null is an empty field. A text that a spreadsheet would run
 * as a formula is led by an apostrophe.
 */
export function writeCsvRecord(values: readonly (string | number | null)[]): string {
	return `${values.map(toCell).join(',')}\r\n`;
}
