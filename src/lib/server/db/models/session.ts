import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { integer, key, text, textOrNull } from './columns';

/** A signed-in browser. */
export class SessionModel extends Model<
	InferAttributes<SessionModel>,
	InferCreationAttributes<SessionModel>
> {
	/** SHA-256 of the id in the cookie. */
	declare idHash: string;
	declare personId: number;
	declare createdAt: string;
	declare expiresAt: string;
	declare lastSeenAt: string;
	declare userAgent: string | null;

	static define(sequelize: Sequelize): void {
		SessionModel.init(
			{
				idHash: key(text()),
				personId: integer(),
				createdAt: text(),
				expiresAt: text(),
				lastSeenAt: text(),
				userAgent: textOrNull()
			},
			{ sequelize, modelName: 'SessionModel', tableName: 'sessions' }
		);
	}
}
