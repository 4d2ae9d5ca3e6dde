import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { integer, serial, text } from './columns';

/** What the parser made of one piece of evidence. */
export class ReadingModel extends Model<
	InferAttributes<ReadingModel>,
	InferCreationAttributes<ReadingModel>
> {
	declare id: CreationOptional<number>;
	declare evidenceId: number;
	/** From 0, in the order of the evidence. */
	declare position: number;
	/** JSON of the Reading. */
	declare body: string;

	static define(sequelize: Sequelize): void {
		ReadingModel.init(
			{
				id: serial(),
				evidenceId: integer(),
				position: integer(),
				body: text()
			},
			{ sequelize, modelName: 'ReadingModel', tableName: 'readings' }
		);
	}
}
