import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { ReviewAction } from '$lib/domain/runbook/review';
import { integer, integerOrNull, serial, text, textOrNull } from './columns';

/** What somebody did with a revision of a runbook; never changed. */
export class RunbookReviewModel extends Model<
	InferAttributes<RunbookReviewModel>,
	InferCreationAttributes<RunbookReviewModel>
> {
	declare id: CreationOptional<number>;
	declare runbookId: number;
	declare revision: number;
	declare action: ReviewAction;
	declare byId: number | null;
	declare at: string;
	declare note: string | null;

	static define(sequelize: Sequelize): void {
		RunbookReviewModel.init(
			{
				id: serial(),
				runbookId: integer(),
				revision: integer(),
				action: text(),
				byId: integerOrNull(),
				at: text(),
				note: textOrNull()
			},
			{ sequelize, modelName: 'RunbookReviewModel', tableName: 'runbookReviews' }
		);
	}
}
