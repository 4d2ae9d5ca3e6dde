const NAMES: Record<string, string> = {
	postgresql: 'PostgreSQL',
	mariadb: 'MariaDB',
	mysql: 'MySQL',
	showplan: 'Showplan engine'
};

/** An engine as people write it, with its version: "PostgreSQL 15.18"; null: it isn't known. */
export function nameEngine(engine: string | null, version: string | null = null): string | null {
	const name = engine === null ? undefined : NAMES[engine];
	if (name === undefined) return null;
	return version === null || version === '' ? name : `${name} ${version}`;
}
