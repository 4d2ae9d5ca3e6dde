import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { key, text } from './columns';

/** Facts of this installation. */
export class SettingModel extends Model<
	InferAttributes<SettingModel>,
	InferCreationAttributes<SettingModel>
> {
	declare key: string;
	/** JSON. */
	declare value: string;

	static define(sequelize: Sequelize): void {
		SettingModel.init(
			{
				key: key(text()),
				value: text()
			},
			{ sequelize, modelName: 'SettingModel', tableName: 'settings' }
		);
	}
}
