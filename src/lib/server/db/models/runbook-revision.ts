import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { integer, integerOrNull, key, text, textOrNull } from './columns';

/** One text of a runbook; never changed. */
export class RunbookRevisionModel extends Model<
	InferAttributes<RunbookRevisionModel>,
	InferCreationAttributes<RunbookRevisionModel>
> {
	declare runbookId: number;
	declare revision: number;
	declare title: string;
	declare summary: string;
	/** Markdown. */
	declare body: string;
	/** JSON list of engines. */
	declare engines: string;
	/** JSON list of symptom ids. */
	declare symptoms: string;
	declare reviewEveryDays: number;
	declare createdAt: string;
	declare createdById: number | null;
	/** What its author said of the change. */
	declare note: CreationOptional<string | null>;

	static define(sequelize: Sequelize): void {
		RunbookRevisionModel.init(
			{
				runbookId: key(integer()),
				revision: key(integer()),
				title: text(),
				summary: text(),
				body: text(),
				engines: text(),
				symptoms: text(),
				reviewEveryDays: integer(),
				createdAt: text(),
				createdById: integerOrNull(),
				note: textOrNull()
			},
			{ sequelize, modelName: 'RunbookRevisionModel', tableName: 'runbookRevisions' }
		);
	}
}
