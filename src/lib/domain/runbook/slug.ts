const MAX_LENGTH = 70;

/** Names that lead elsewhere under /runbooks. */
const RESERVED = ['new'];

/** A title as a name in addresses: "Vacuum, then ANALYZE" → "vacuum-then-analyze"; "runbook" where nothing is left. */
export function slugOf(title: string): string {
	const words = title
		.normalize('NFKD')
		.replace(/\p{M}/gu, '')
		.toLowerCase()
		.replace(/[^a-z0-9]+/g, '-')
		.replace(/^-|-$/g, '');
	if (words.length <= MAX_LENGTH) return words || 'runbook';
	// Cut between words where there is a place for it.
	const cut = words.slice(0, MAX_LENGTH + 1);
	return cut.includes('-') ? cut.slice(0, cut.lastIndexOf('-')) : words.slice(0, MAX_LENGTH);
}

/** The slug of a title that nobody has yet: "…", "…-2", "…-3". */
export function findFreeSlug(title: string, taken: ReadonlySet<string>): string {
	const wanted = slugOf(title);
	const isFree = (slug: string) => !taken.has(slug) && !RESERVED.includes(slug);
	if (isFree(wanted)) return wanted;
	for (let count = 2; ; count += 1) {
		const candidate = `${wanted}-${count}`;
		if (isFree(candidate)) return candidate;
	}
}
