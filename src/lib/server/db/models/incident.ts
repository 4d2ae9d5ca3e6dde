import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { IncidentState, Origin, Severity } from '$lib/domain/incident/incident';
import { integer, integerOrNull, serial, text, textOrNull } from './columns';

/** An incident as it stands now. */
export class IncidentModel extends Model<
	InferAttributes<IncidentModel>,
	InferCreationAttributes<IncidentModel>
> {
	declare number: CreationOptional<number>;
	declare title: string;
	declare narrative: string;
	declare service: string | null;
	declare engine: string | null;
	declare engineVersion: string | null;
	declare database: string | null;
	declare severity: Severity;
	declare state: IncidentState;
	declare ownerId: number | null;
	declare origin: Origin;
	declare startedAt: string | null;
	declare detectedAt: string | null;
	declare containedAt: string | null;
	declare resolvedAt: string | null;
	declare cause: string | null;
	declare resolution: string | null;
	/** JSON list of texts. */
	declare labels: string;
	declare revision: number;
	declare mergedInto: number | null;
	declare createdAt: string;
	/** null: the system. */
	declare createdById: number | null;
	declare updatedAt: string;

	static define(sequelize: Sequelize): void {
		IncidentModel.init(
			{
				number: serial(),
				title: text(),
				narrative: text(),
				service: textOrNull(),
				engine: textOrNull(),
				engineVersion: textOrNull(),
				database: textOrNull(),
				severity: integer(),
				state: text(),
				ownerId: integerOrNull(),
				origin: text(),
				startedAt: textOrNull(),
				detectedAt: textOrNull(),
				containedAt: textOrNull(),
				resolvedAt: textOrNull(),
				cause: textOrNull(),
				resolution: textOrNull(),
				labels: text(),
				revision: integer(),
				mergedInto: integerOrNull(),
				createdAt: text(),
				createdById: integerOrNull(),
				updatedAt: text()
			},
			{ sequelize, modelName: 'IncidentModel', tableName: 'incidents' }
		);
	}
}
