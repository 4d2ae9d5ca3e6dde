import type { Engine } from '$lib/domain/reading/reading';
import { toMemorySetting } from '$lib/domain/sizing/units';

const BYTES_PER_KB = 1024;

/**
 * The statement that gives one session the setting, never below the need; null: the engine has no such setting
 * for a session.
 */
export function writeSetting(engine: Engine, setting: { name: string; valueKb: number }): string | null {
	switch (engine) {
		case 'postgresql':
		case 'unknown':
			return `SET ${setting.name} = '${toMemorySetting(roundUp(setting.valueKb))}';`;
		case 'mariadb':
		case 'mysql':
			return `SET SESSION ${setting.name} = ${Math.ceil(setting.valueKb) * BYTES_PER_KB};`;
		case 'showplan':
			return null;
	}
}

/** From 10 MB on whole megabytes: nobody types 14436kB at night. */
function roundUp(kb: number): number {
	return kb < 10 * 1024 ? Math.ceil(kb) : Math.ceil(kb / 1024) * 1024;
}
