import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Role } from '$lib/domain/person/person';
import { integer, serial, text, textOrNull } from './columns';

/** Somebody who may sign in. */
export class PersonModel extends Model<InferAttributes<PersonModel>, InferCreationAttributes<PersonModel>> {
	declare id: CreationOptional<number>;
	declare name: string;
	/** Lower case. */
	declare email: string;
	declare role: Role;
	/** null: has not set a password yet. */
	declare passwordHash: string | null;
	declare createdAt: string;
	declare deactivatedAt: string | null;
	declare revision: number;
	/** null: never, or before it was kept. */
	declare lastSignInAt: CreationOptional<string | null>;

	static define(sequelize: Sequelize): void {
		PersonModel.init(
			{
				id: serial(),
				name: text(),
				email: text(),
				role: text(),
				passwordHash: textOrNull(),
				createdAt: text(),
				deactivatedAt: textOrNull(),
				revision: integer(),
				lastSignInAt: textOrNull()
			},
			{ sequelize, modelName: 'PersonModel', tableName: 'people' }
		);
	}
}
