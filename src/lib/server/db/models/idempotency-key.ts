import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integerOrNull, key, text, textOrNull } from './columns';

/** The first answer to a POST that carried an Idempotency-Key. */
export class IdempotencyKeyModel extends Model<
	InferAttributes<IdempotencyKeyModel>,
	InferCreationAttributes<IdempotencyKeyModel>
> {
	/** `person:7`: whose key it is. */
	declare who: string;
	declare route: string;
	declare key: string;
	/** SHA-256 of the request's body. */
	declare bodyHash: string;
	declare state: 'running' | 'done';
	declare status: number | null;
	/** JSON of the headers to repeat. */
	declare headers: string | null;
	declare body: string | null;
	declare createdAt: string;

	static define(sequelize: Sequelize): void {
		IdempotencyKeyModel.init(
			{
				who: key(text()),
				route: key(text()),
				key: key(text()),
				bodyHash: text(),
				state: text(),
				status: integerOrNull(),
				headers: textOrNull(),
				body: textOrNull(),
				createdAt: text()
			},
			{ sequelize, modelName: 'IdempotencyKeyModel', tableName: 'idempotencyKeys' }
		);
	}
}
