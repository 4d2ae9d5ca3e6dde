import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { EntryKind } from '$lib/domain/incident/incident';
import { integer, integerOrNull, serial, text } from './columns';

/** A dated line of an incident's log. */
export class EntryModel extends Model<InferAttributes<EntryModel>, InferCreationAttributes<EntryModel>> {
	declare id: CreationOptional<number>;
	declare incidentNumber: number;
	declare at: string;
	/** Markdown. */
	declare text: string;
	/** null: the system. */
	declare authorId: number | null;
	declare kind: EntryKind;
	declare revision: number;
	declare createdAt: string;
	declare updatedAt: string;

	static define(sequelize: Sequelize): void {
		EntryModel.init(
			{
				id: serial(),
				incidentNumber: integer(),
				at: text(),
				text: text(),
				authorId: integerOrNull(),
				kind: text(),
				revision: integer(),
				createdAt: text(),
				updatedAt: text()
			},
			{ sequelize, modelName: 'EntryModel', tableName: 'entries' }
		);
	}
}
