import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Role } from '$lib/domain/person/person';
import { integer, serial, text, textOrNull } from './columns';

/** A key for a program, made by a person. */
export class TokenModel extends Model<InferAttributes<TokenModel>, InferCreationAttributes<TokenModel>> {
	declare id: CreationOptional<number>;
	declare personId: number;
	declare name: string;
	/** SHA-256 of the token. */
	declare tokenHash: string;
	declare role: Role;
	declare createdAt: string;
	declare expiresAt: string;
	declare lastUsedAt: string | null;
	declare revokedAt: string | null;

	static define(sequelize: Sequelize): void {
		TokenModel.init(
			{
				id: serial(),
				personId: integer(),
				name: text(),
				tokenHash: text(),
				role: text(),
				createdAt: text(),
				expiresAt: text(),
				lastUsedAt: textOrNull(),
				revokedAt: textOrNull()
			},
			{ sequelize, modelName: 'TokenModel', tableName: 'tokens' }
		);
	}
}
