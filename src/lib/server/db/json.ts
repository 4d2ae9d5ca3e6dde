/** The text of a JSON column. */
export function toJson(value: unknown): string {
	return JSON.stringify(value);
}

/** What a JSON column holds. Only for text that `toJson` wrote: its shape is trusted. */
export function fromJson<T>(text: string): T {
	return JSON.parse(text) as T;
}
