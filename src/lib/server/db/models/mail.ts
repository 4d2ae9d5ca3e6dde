import {
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { integer, serial, text, textOrNull } from './columns';

/** waiting: to be sent; sent: a mail server took it; kept: it lies in the local outbox; failed: given up. */
export type MailState = 'waiting' | 'sent' | 'kept' | 'failed';

/** A mail on its way out. */
export class MailModel extends Model<InferAttributes<MailModel>, InferCreationAttributes<MailModel>> {
	declare id: CreationOptional<number>;
	declare recipient: string;
	declare subject: string;
	/** null: it went to a mail server, or was given up; the links in it are nobody's business here. */
	declare text: string | null;
	declare state: MailState;
	declare createdAt: string;
	declare sentAt: CreationOptional<string | null>;
	declare tries: CreationOptional<number>;
	declare nextTryAt: string;
	/** Why the last try failed; null: none has. */
	declare failure: CreationOptional<string | null>;

	static define(sequelize: Sequelize): void {
		MailModel.init(
			{
				id: serial(),
				recipient: text(),
				subject: text(),
				text: textOrNull(),
				state: text(),
				createdAt: text(),
				sentAt: textOrNull(),
				tries: { ...integer(), defaultValue: 0 },
				nextTryAt: text(),
				failure: textOrNull()
			},
			{ sequelize, modelName: 'MailModel', tableName: 'mails' }
		);
	}
}
