import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integer, integerOrNull, key, text } from './columns';

/** What an edit of an entry replaced. */
export class EntryRevisionModel extends Model<
	InferAttributes<EntryRevisionModel>,
	InferCreationAttributes<EntryRevisionModel>
> {
	declare entryId: number;
	/** The revision that was replaced. */
	declare revision: number;
	declare text: string;
	declare at: string;
	declare changedById: number | null;
	declare changedAt: string;

	static define(sequelize: Sequelize): void {
		EntryRevisionModel.init(
			{
				entryId: key(integer()),
				revision: key(integer()),
				text: text(),
				at: text(),
				changedById: integerOrNull(),
				changedAt: text()
			},
			{ sequelize, modelName: 'EntryRevisionModel', tableName: 'entryRevisions' }
		);
	}
}
