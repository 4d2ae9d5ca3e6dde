import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { integer, key, text, textOrNull } from './columns';

/** A link that was mailed to somebody who forgot their password. */
export class PasswordResetModel extends Model<
	InferAttributes<PasswordResetModel>,
	InferCreationAttributes<PasswordResetModel>
> {
	/** SHA-256 of the link's secret. */
	declare tokenHash: string;
	declare personId: number;
	declare createdAt: string;
	declare expiresAt: string;
	declare usedAt: CreationOptional<string | null>;

	static define(sequelize: Sequelize): void {
		PasswordResetModel.init(
			{
				tokenHash: key(text()),
				personId: integer(),
				createdAt: text(),
				expiresAt: text(),
				usedAt: textOrNull()
			},
			{ sequelize, modelName: 'PasswordResetModel', tableName: 'passwordResets' }
		);
	}
}
