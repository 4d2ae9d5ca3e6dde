import { Op } from 'sequelize';
import { IdempotencyKeyModel } from '../db/models/idempotency-key';
import { selectOne } from '../db/query';
import { write } from '../db/transaction';

/** Whose key, on which route. */
export interface KeyName {
	who: string;
	route: string;
	key: string;
}

/** The first answer, as it is repeated. */
export interface KeptAnswer {
	bodyHash: string;
	status: number;
	headers: Record<string, string>;
	body: string;
}

interface KeyRow {
	state: 'running' | 'done';
	bodyHash: string;
	status: number | null;
	headers: string | null;
	body: string | null;
}

const KEPT_MS = 24 * 60 * 60 * 1000;

/**
 * Takes a key for a call that begins now. Answers `taken`, or what the key stands for already: a call under
 * way, or its answer. Keys of more than 24 h ago are forgotten first.
 */
export function takeKey(name: KeyName): Promise<'taken' | 'running' | KeptAnswer> {
	return write(async (transaction) => {
		const now = Date.now();
		await IdempotencyKeyModel.destroy({
			where: { createdAt: { [Op.lt]: new Date(now - KEPT_MS).toISOString() } },
			transaction
		});
		const row = await selectOne<KeyRow>(
			`SELECT state, bodyHash, status, headers, body FROM idempotencyKeys
			WHERE who = :who AND route = :route AND key = :key`,
			{ ...name }
		);
		if (row?.state === 'running') return 'running';
		if (row) {
			return {
				bodyHash: row.bodyHash,
				status: row.status ?? 200,
				headers: JSON.parse(row.headers ?? '{}') as Record<string, string>,
				body: row.body ?? ''
			};
		}
		const createdAt = new Date(now).toISOString();
		await IdempotencyKeyModel.create({ ...name, bodyHash: '', state: 'running', createdAt }, { transaction });
		return 'taken';
	});
}

/** Keeps the answer of a call that succeeded. */
export function keepAnswer(name: KeyName, answer: KeptAnswer): Promise<unknown> {
	const { bodyHash, status, body } = answer;
	return write((transaction) =>
		IdempotencyKeyModel.update(
			{ state: 'done', bodyHash, status, body, headers: JSON.stringify(answer.headers) },
			{ where: { ...name }, transaction }
		)
	);
}

/** Frees the key of a call that did nothing, so that it can be tried again. */
export function releaseKey(name: KeyName): Promise<unknown> {
	return write((transaction) => IdempotencyKeyModel.destroy({ where: { ...name }, transaction }));
}

/** Frees the keys of calls that a crash cut off; at the start nothing is under way. */
export function releaseRunningKeys(): Promise<unknown> {
	return write((transaction) => IdempotencyKeyModel.destroy({ where: { state: 'running' }, transaction }));
}
