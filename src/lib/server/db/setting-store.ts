import { fromJson, toJson } from './json';
import { SettingModel } from './models/setting';
import { selectOne } from './query';
import { write } from './transaction';

/** A fact of this installation; null where it was never set, or in a database without its tables. */
export async function readSetting(key: string): Promise<unknown> {
	const table = await selectOne("SELECT name FROM sqlite_master WHERE type = 'table' AND name = 'settings'");
	if (!table) return null;
	const row = await selectOne<{ value: string }>('SELECT value FROM settings WHERE key = :key', { key });
	return row ? fromJson<unknown>(row.value) : null;
}

/** Sets a fact of this installation. */
export async function writeSetting(key: string, value: unknown): Promise<void> {
	await write((transaction) => SettingModel.upsert({ key, value: toJson(value) }, { transaction }));
}
