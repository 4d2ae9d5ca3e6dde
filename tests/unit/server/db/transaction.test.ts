import { describe, expect, it } from 'vitest';
import { select } from '$lib/server/db/query';
import { SettingModel } from '$lib/server/db/models/setting';
import { write } from '$lib/server/db/transaction';
import { withDatabase } from '../../../fixtures/database';

withDatabase();

async function settingKeys(): Promise<string[]> {
	const rows = await select<{ key: string }>('SELECT key FROM settings ORDER BY key');
	return rows.map((row) => row.key);
}

describe('write', () => {
	it('keeps nothing of a transaction that throws', async () => {
		const failing = write(async () => {
			await SettingModel.create({ key: 'half', value: '1' });
			throw new Error('on purpose');
		});
		await expect(failing).rejects.toThrow('on purpose');
		expect(await settingKeys()).toEqual([]);
	});

	it('runs the next writer after one that failed', async () => {
		const failing = write(() => Promise.reject(new Error('on purpose')));
		const next = write(() => SettingModel.create({ key: 'next', value: '1' }));
		await expect(failing).rejects.toThrow();
		await next;
		expect(await settingKeys()).toEqual(['next']);
	});

	it('joins the transaction that it is called in', async () => {
		const failing = write(async () => {
			await write(() => SettingModel.create({ key: 'inner', value: '1' }));
			expect(await settingKeys()).toEqual(['inner']);
			throw new Error('on purpose');
		});
		await expect(failing).rejects.toThrow('on purpose');
		expect(await settingKeys()).toEqual([]);
	});

	it('takes 40 writers and 40 readers at once without a busy database', async () => {
		await write(() => SettingModel.create({ key: 'count', value: '0' }));
		const increase = () =>
			write(async () => {
				const row = await SettingModel.findByPk('count', { rejectOnEmpty: true });
				await row.update({ value: String(Number(row.value) + 1) });
			});
		const work = Array.from({ length: 40 }, () => [increase(), settingKeys()]).flat();
		const results = await Promise.allSettled(work);
		expect(results.filter((result) => result.status === 'rejected')).toEqual([]);
		const [row] = await select<{ value: string }>("SELECT value FROM settings WHERE key = 'count'");
		expect(row?.value).toBe('40');
	});
});
