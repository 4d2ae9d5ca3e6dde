import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { DraftState } from '$lib/domain/runbook/review';
import type { RunbookState } from '$lib/domain/runbook/runbook';
import { integer, integerOrNull, serial, text, textOrNull } from './columns';

/** A runbook's place and state; its text lies in its revisions. */
export class RunbookModel extends Model<
	InferAttributes<RunbookModel>,
	InferCreationAttributes<RunbookModel>
> {
	declare id: CreationOptional<number>;
	declare slug: string;
	declare state: RunbookState;
	declare ownerId: number | null;
	declare reviewerId: number | null;
	declare reviewDue: string | null;
	declare revision: number;
	declare publishedRevision: number | null;
	/** How far the newest text is where an older one is published; null: there is no newer one. */
	declare draftState: CreationOptional<DraftState | null>;
	declare createdAt: string;
	declare updatedAt: string;

	static define(sequelize: Sequelize): void {
		RunbookModel.init(
			{
				id: serial(),
				slug: text(),
				state: text(),
				ownerId: integerOrNull(),
				reviewerId: integerOrNull(),
				reviewDue: textOrNull(),
				revision: integer(),
				publishedRevision: integerOrNull(),
				draftState: textOrNull(),
				createdAt: text(),
				updatedAt: text()
			},
			{ sequelize, modelName: 'RunbookModel', tableName: 'runbooks' }
		);
	}
}
