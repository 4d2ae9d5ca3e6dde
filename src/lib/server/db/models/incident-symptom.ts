import { Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import type { SymptomId } from '$lib/domain/symptom/symptom';
import { integer, key, real, text } from './columns';

/** Symptoms of an incident over all its readings, for filters. */
export class IncidentSymptomModel extends Model<
	InferAttributes<IncidentSymptomModel>,
	InferCreationAttributes<IncidentSymptomModel>
> {
	declare incidentNumber: number;
	declare symptomId: SymptomId;
	/** The heaviest of them. */
	declare weight: number;

	static define(sequelize: Sequelize): void {
		IncidentSymptomModel.init(
			{
				incidentNumber: key(integer()),
				symptomId: key(text()),
				weight: real()
			},
			{ sequelize, modelName: 'IncidentSymptomModel', tableName: 'incidentSymptoms' }
		);
	}
}
