import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Actor } from '$lib/domain/person/person';
import { integerOrNull, serial, text } from './columns';

/** Who did what, when. */
export class AuditModel extends Model<InferAttributes<AuditModel>, InferCreationAttributes<AuditModel>> {
	declare id: CreationOptional<number>;
	declare at: string;
	/** null: the system. */
	declare actorId: number | null;
	declare actorName: string;
	declare via: Actor['via'];
	/** `incident.create` */
	declare action: string;
	/** `incident:412` */
	declare subject: string;
	/** JSON. */
	declare detail: string;

	static define(sequelize: Sequelize): void {
		AuditModel.init(
			{
				id: serial(),
				at: text(),
				actorId: integerOrNull(),
				actorName: text(),
				via: text(),
				action: text(),
				subject: text(),
				detail: text()
			},
			{ sequelize, modelName: 'AuditModel', tableName: 'audit' }
		);
	}
}
