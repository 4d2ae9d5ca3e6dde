import type { Prefill } from '$lib/domain/incident/prefill';

export const DRAFT_FIELDS = [
	'title',
	'service',
	'engine',
	'engineVersion',
	'database',
	'detectedAt',
	'startedAt',
	'severity',
	'narrative'
] as const;
export type DraftField = (typeof DRAFT_FIELDS)[number];
export type DraftValues = Record<DraftField, string>;

const KEY = 'catchwater.draft.incident';
const KEEP_AFTER_MS = 300;

/**
 * The form of a new incident: what a person typed, what evidence filled in and from where. A suggestion never
 * replaces what somebody typed; what was cleared stays empty. Kept on this device, without the evidence.
 */
export class IncidentDraft {
	values = $state<DraftValues>(emptyDraft());
	/** Where a value was read; null: a person typed it, or nobody did. */
	from = $state<Partial<Record<DraftField, string>>>({});
	/** Whether a draft was found on this device. */
	restored = $state(false);
	/** The fields that a person typed into. */
	#typed: DraftField[] = [];
	#timer: ReturnType<typeof setTimeout> | undefined;

	/** @param typed what a person typed before a refusal: it is theirs. */
	constructor(typed: Record<string, string> = {}) {
		for (const field of DRAFT_FIELDS) {
			const value = typed[field];
			if (value === undefined) continue;
			this.values[field] = value;
			if (value !== '') this.#own(field);
		}
	}

	/** A person typed into the field: it is theirs from now on. */
	typed(field: DraftField): void {
		this.#own(field);
		delete this.from[field];
		this.keep();
	}

	/** Empties what evidence filled in, for good. */
	clear(field: DraftField): void {
		this.values[field] = '';
		this.typed(field);
	}

	/** Fills the fields that nobody typed into; takes back what evidence that is gone had filled. */
	offer(prefill: Prefill): void {
		for (const field of ['title', 'service', 'engine', 'engineVersion', 'database'] as const) {
			if (this.#typed.includes(field)) continue;
			const suggestion = prefill[field];
			if (suggestion !== null) {
				this.values[field] = suggestion.value;
				this.from[field] = suggestion.from;
			} else if (this.from[field] !== undefined) {
				this.values[field] = '';
				delete this.from[field];
			}
		}
		this.keep();
	}

	/** Sets when it was noticed, as long as nobody typed it: the zone may become known after the first paint. */
	offerNoticed(detectedAt: string): void {
		if (!this.#typed.includes('detectedAt')) this.values.detectedAt = detectedAt;
	}

	/** Takes up a draft that this device kept; says whether there was one. */
	restore(): void {
		const kept = readKept();
		if (kept === null) return;
		for (const field of DRAFT_FIELDS) {
			const value = kept[field];
			if (value === undefined || value === '' || value === this.values[field]) continue;
			this.values[field] = value;
			this.#own(field);
			this.restored = true;
		}
	}

	/** Keeps what a person typed; what evidence filled in comes back with the evidence. */
	keep(): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => {
			const typed = this.#typed.filter((field) => this.values[field] !== '');
			if (typed.length === 0) localStorage.removeItem(KEY);
			else
				localStorage.setItem(
					KEY,
					JSON.stringify(Object.fromEntries(typed.map((field) => [field, this.values[field]])))
				);
		}, KEEP_AFTER_MS);
	}

	/** Forgets the draft: it was logged, or thrown away. */
	forget(): void {
		clearTimeout(this.#timer);
		localStorage.removeItem(KEY);
	}

	#own(field: DraftField): void {
		if (!this.#typed.includes(field)) this.#typed.push(field);
	}

	/** Throws the draft away and begins anew. */
	restart(): void {
		this.forget();
		this.values = { ...emptyDraft(), detectedAt: this.values.detectedAt };
		this.from = {};
		this.restored = false;
		this.#typed = [];
	}
}

function emptyDraft(): DraftValues {
	return {
		title: '',
		service: '',
		engine: '',
		engineVersion: '',
		database: '',
		detectedAt: '',
		startedAt: '',
		severity: '3',
		narrative: ''
	};
}

function readKept(): Partial<DraftValues> | null {
	const text = localStorage.getItem(KEY);
	if (text === null) return null;
	const kept: unknown = JSON.parse(text);
	if (typeof kept !== 'object' || kept === null) return null;
	const values: Partial<DraftValues> = {};
	for (const [name, value] of Object.entries(kept)) {
		const field = DRAFT_FIELDS.find((known) => known === name);
		if (field !== undefined && typeof value === 'string') values[field] = value;
	}
	return values;
}
