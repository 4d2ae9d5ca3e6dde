import type { z } from 'zod';
import { cautionInput } from '$lib/domain/caution/caution-input';
import {
	attemptInput,
	attemptPatch,
	entryInput,
	entryPatch,
	incidentInput,
	incidentPatch
} from '$lib/domain/incident/incident-input';
import { invitationInput, personPatch, tokenInput } from '$lib/domain/person/person-input';
import { settingsPatch } from '$lib/domain/settings/settings';
import { reviewInput, runbookInput, runbookPatch } from '$lib/domain/runbook/runbook-input';
import { sizingInput } from '$lib/domain/sizing/sizing';

/** What clients send, each named once in the document. */
export const INPUTS: ReadonlyMap<string, z.ZodType> = new Map<string, z.ZodType>([
	['IncidentInput', incidentInput],
	['IncidentPatch', incidentPatch],
	['EntryInput', entryInput],
	['EntryPatch', entryPatch],
	['AttemptInput', attemptInput],
	['AttemptPatch', attemptPatch],
	['SizingInput', sizingInput],
	['CautionInput', cautionInput],
	['RunbookInput', runbookInput],
	['RunbookPatch', runbookPatch],
	['ReviewInput', reviewInput],
	['PersonPatch', personPatch],
	['InvitationInput', invitationInput],
	['TokenInput', tokenInput],
	['SettingsPatch', settingsPatch]
]);
