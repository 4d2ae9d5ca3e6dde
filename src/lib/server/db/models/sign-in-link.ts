import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integer, key, text, textOrNull } from './columns';

/** A link that lets a person set a password, once. */
export class SignInLinkModel extends Model<
	InferAttributes<SignInLinkModel>,
	InferCreationAttributes<SignInLinkModel>
> {
	/** SHA-256 of the link's secret. */
	declare tokenHash: string;
	declare personId: number;
	declare expiresAt: string;
	declare usedAt: string | null;

	static define(sequelize: Sequelize): void {
		SignInLinkModel.init(
			{
				tokenHash: key(text()),
				personId: integer(),
				expiresAt: text(),
				usedAt: textOrNull()
			},
			{ sequelize, modelName: 'SignInLinkModel', tableName: 'signInLinks' }
		);
	}
}
