import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integer, integerOrNull, key, text } from './columns';

/** What an edit of an incident replaced. */
export class IncidentRevisionModel extends Model<
	InferAttributes<IncidentRevisionModel>,
	InferCreationAttributes<IncidentRevisionModel>
> {
	declare incidentNumber: number;
	/** The revision that was replaced. */
	declare revision: number;
	declare changedById: number | null;
	declare changedAt: string;
	/** JSON of the fields replaced. */
	declare before: string;

	static define(sequelize: Sequelize): void {
		IncidentRevisionModel.init(
			{
				incidentNumber: key(integer()),
				revision: key(integer()),
				changedById: integerOrNull(),
				changedAt: text(),
				before: text()
			},
			{ sequelize, modelName: 'IncidentRevisionModel', tableName: 'incidentRevisions' }
		);
	}
}
