/** One page of a list. */
export interface Page<T> {
	items: T[];
	/** Where the next page begins, to be handed back as `cursor`; null: this is the last. */
	next: string | null;
	/** Of the whole list under the same filter; null: not counted. */
	total: number | null;
}
