import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integer, integerOrNull, key, textOrNull } from './columns';

/** A step of an attempt that was ticked or skipped. */
export class AttemptStepModel extends Model<
	InferAttributes<AttemptStepModel>,
	InferCreationAttributes<AttemptStepModel>
> {
	declare attemptId: number;
	declare number: number;
	declare tickedAt: string | null;
	declare byId: number | null;
	/** The reason; null: not skipped. */
	declare skipped: string | null;

	static define(sequelize: Sequelize): void {
		AttemptStepModel.init(
			{
				attemptId: key(integer()),
				number: key(integer()),
				tickedAt: textOrNull(),
				byId: integerOrNull(),
				skipped: textOrNull()
			},
			{ sequelize, modelName: 'AttemptStepModel', tableName: 'attemptSteps' }
		);
	}
}
