import { fail, ok, type Outcome } from '$lib/domain/problem';

/** The number of an incident, or the id of something in it, out of an address. What is none names nothing. */
export function readNumber(text: string): Outcome<number> {
	return /^[1-9]\d{0,14}$/.test(text) ? ok(Number(text)) : fail('not_found', `There is no ${text}.`);
}

/** Several of them, in order; the first that is none decides. */
export function readNumbers<const T extends readonly string[]>(
	...texts: T
): Outcome<{ [K in keyof T]: number }> {
	const numbers: number[] = [];
	for (const text of texts) {
		const read = readNumber(text);
		if (!read.ok) return read;
		numbers.push(read.value);
	}
	return ok(numbers as { [K in keyof T]: number });
}
