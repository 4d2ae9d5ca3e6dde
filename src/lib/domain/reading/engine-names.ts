import type { Engine } from './reading';

/** Engines as people write them; null: there is no name to say. */
export const ENGINE_NAMES: Readonly<Record<Engine, string | null>> = {
	postgresql: 'PostgreSQL',
	mariadb: 'MariaDB',
	mysql: 'MySQL',
	showplan: 'Showplan engine',
	unknown: null
};
