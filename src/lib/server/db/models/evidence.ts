import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Evidence, EvidenceKind } from '$lib/domain/incident/incident';
import { integer, integerOrNull, serial, text } from './columns';

/** A file or a paste; its masked bytes lie under their SHA-256 in the data folder. */
export class EvidenceModel extends Model<
	InferAttributes<EvidenceModel>,
	InferCreationAttributes<EvidenceModel>
> {
	declare id: CreationOptional<number>;
	/** null: not claimed by an incident yet. */
	declare incidentNumber: number | null;
	/** Of the masked bytes. */
	declare sha256: string;
	declare name: string;
	declare bytes: number;
	declare kind: EvidenceKind;
	declare format: string;
	declare state: Evidence['state'];
	declare addedAt: string;
	declare addedById: number | null;

	static define(sequelize: Sequelize): void {
		EvidenceModel.init(
			{
				id: serial(),
				incidentNumber: integerOrNull(),
				sha256: text(),
				name: text(),
				bytes: integer(),
				kind: text(),
				format: text(),
				state: text(),
				addedAt: text(),
				addedById: integerOrNull()
			},
			{ sequelize, modelName: 'EvidenceModel', tableName: 'evidence' }
		);
	}
}
