import type { Sequelize } from 'sequelize';
import { AttemptModel } from './attempt';
import { AttemptStepModel } from './attempt-step';
import { AuditModel } from './audit';
import { EntryModel } from './entry';
import { EntryRevisionModel } from './entry-revision';
import { EvidenceModel } from './evidence';
import { IdempotencyKeyModel } from './idempotency-key';
import { IncidentModel } from './incident';
import { IncidentRevisionModel } from './incident-revision';
import { IncidentSymptomModel } from './incident-symptom';
import { InvitationModel } from './invitation';
import { MailModel } from './mail';
import { PasswordResetModel } from './password-reset';
import { PersonModel } from './person';
import { ReadingModel } from './reading';
import { RunbookModel } from './runbook';
import { RunbookReviewModel } from './runbook-review';
import { RunbookRevisionModel } from './runbook-revision';
import { SessionModel } from './session';
import { SettingModel } from './setting';
import { SignInLinkModel } from './sign-in-link';
import { TokenModel } from './token';

const MODELS = [
	AttemptModel,
	AttemptStepModel,
	AuditModel,
	EntryModel,
	EntryRevisionModel,
	EvidenceModel,
	IdempotencyKeyModel,
	IncidentModel,
	IncidentRevisionModel,
	IncidentSymptomModel,
	InvitationModel,
	MailModel,
	PasswordResetModel,
	PersonModel,
	ReadingModel,
	RunbookModel,
	RunbookReviewModel,
	RunbookRevisionModel,
	SessionModel,
	SettingModel,
	SignInLinkModel,
	TokenModel
] as const;

/** Ties every model to the database just opened. */
export function defineModels(sequelize: Sequelize): void {
	for (const model of MODELS) model.define(sequelize);
}
