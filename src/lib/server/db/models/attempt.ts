import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { AttemptOutcome } from '$lib/domain/incident/attempt';
import { integer, integerOrNull, serial, text, textOrNull } from './columns';

/** A runbook, or a free action, tried in an incident. */
export class AttemptModel extends Model<
	InferAttributes<AttemptModel>,
	InferCreationAttributes<AttemptModel>
> {
	declare id: CreationOptional<number>;
	declare incidentNumber: number;
	/** null: a free action. */
	declare runbookSlug: string | null;
	declare runbookRevision: number | null;
	declare title: string;
	declare startedAt: string;
	declare endedAt: string | null;
	declare byId: number | null;
	declare outcome: AttemptOutcome | null;
	declare note: string | null;
	declare beforeEvidenceId: number | null;
	declare afterEvidenceId: number | null;
	declare revision: number;

	static define(sequelize: Sequelize): void {
		AttemptModel.init(
			{
				id: serial(),
				incidentNumber: integer(),
				runbookSlug: textOrNull(),
				runbookRevision: integerOrNull(),
				title: text(),
				startedAt: text(),
				endedAt: textOrNull(),
				byId: integerOrNull(),
				outcome: textOrNull(),
				note: textOrNull(),
				beforeEvidenceId: integerOrNull(),
				afterEvidenceId: integerOrNull(),
				revision: integer()
			},
			{ sequelize, modelName: 'AttemptModel', tableName: 'attempts' }
		);
	}
}
