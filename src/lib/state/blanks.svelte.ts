/** What was filled into the blanks of an attempt's statements; kept on this device while its session lasts. */
export class Blanks {
	values = $state<Record<string, string>>({});
	readonly #key: string;

	constructor(attempt: number, suggested: Readonly<Record<string, string>>) {
		this.#key = `catchwater.blanks.${attempt}`;
		this.values = { ...suggested };
	}

	/** Takes up what was filled in at an earlier step. Call in the browser only. */
	restore(): void {
		const stored = sessionStorage.getItem(this.#key);
		const kept: unknown = stored === null ? null : JSON.parse(stored);
		if (typeof kept !== 'object' || kept === null) return;
		for (const [name, value] of Object.entries(kept))
			if (typeof value === 'string') this.values[name] = value;
	}

	/** Fills one in. */
	fill(name: string, value: string): void {
		this.values[name] = value;
		sessionStorage.setItem(this.#key, JSON.stringify(this.values));
	}
}
