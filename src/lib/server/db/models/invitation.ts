import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Role } from '$lib/domain/person/person';
import { integer, integerOrNull, serial, text, textOrNull } from './columns';

/** Somebody who was asked to join, and what became of it. */
export class InvitationModel extends Model<
	InferAttributes<InvitationModel>,
	InferCreationAttributes<InvitationModel>
> {
	declare id: CreationOptional<number>;
	/** SHA-256 of the link's secret. */
	declare tokenHash: string;
	/** Lower case. */
	declare email: string;
	declare role: Role;
	/** null: the system. */
	declare invitedById: number | null;
	declare createdAt: string;
	declare expiresAt: string;
	declare usedAt: CreationOptional<string | null>;
	declare revokedAt: CreationOptional<string | null>;
	declare revision: CreationOptional<number>;

	static define(sequelize: Sequelize): void {
		InvitationModel.init(
			{
				id: serial(),
				tokenHash: text(),
				email: text(),
				role: text(),
				invitedById: integerOrNull(),
				createdAt: text(),
				expiresAt: text(),
				usedAt: textOrNull(),
				revokedAt: textOrNull(),
				revision: { ...integer(), defaultValue: 1 }
			},
			{ sequelize, modelName: 'InvitationModel', tableName: 'invitations' }
		);
	}
}
