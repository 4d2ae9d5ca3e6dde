/** A runbook's file under content/runbooks, compiled into the program. */
export interface ContentRunbook {
	/** Its name in addresses: the file's name without its ending. */
	slug: string;
	markdown: string;
}

/** The runbooks that Catchwater comes with, by slug. */
export function contentRunbooks(): ContentRunbook[] {
	const files = import.meta.glob<string>('/content/runbooks/*.md', {
		query: '?raw',
		import: 'default',
		eager: true
	});
	return Object.entries(files)
		.map(([path, markdown]) => ({ slug: path.replace(/^.*\//, '').replace(/\.md$/, ''), markdown }))
		.sort((a, b) => a.slug.localeCompare(b.slug));
}
