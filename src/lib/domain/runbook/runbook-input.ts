import { z } from 'zod';
import { ENGINES } from '../reading/reading';
import { SYMPTOM_IDS } from '../symptom/symptom';

/** What people and files give of a runbook, the body aside. */
export const runbookFrontMatter = z.object({
	title: z
		.string({ error: 'Give the runbook a title.' })
		.trim()
		.min(1, 'Give the runbook a title.')
		.max(200, 'At most 200 characters.'),
	summary: z
		.string({ error: 'Say in a sentence or two what it does and when.' })
		.trim()
		.min(1, 'Say in a sentence or two what it does and when.')
		.max(1000, 'At most 1,000 characters.'),
	engines: z
		.array(z.enum(ENGINES, { error: 'Name an engine that Catchwater knows.' }), {
			error: 'Name at least one engine.'
		})
		.min(1, 'Name at least one engine.'),
	symptoms: z
		.array(z.enum(SYMPTOM_IDS, { error: 'Name symptoms of the catalogue.' }), {
			error: 'Name at least one symptom that it is for.'
		})
		.min(1, 'Name at least one symptom that it is for.'),
	reviewEveryDays: z
		.number({ error: 'Say after how many days it is to be read again.' })
		.int()
		.min(7, 'At least a week.')
		.max(1095, 'At most three years.'),
	/** E-mail of the person who looks after it, in a file of content only. */
	owner: z.email().optional()
});
export type RunbookFrontMatter = z.infer<typeof runbookFrontMatter>;

/** A runbook as it is written (API: RunbookInput). */
export const runbookInput = runbookFrontMatter.omit({ owner: true }).extend({
	body: z.string({ error: 'Write at least one step.' }).max(200_000, 'At most 200,000 characters.')
});
export type RunbookInput = z.infer<typeof runbookInput>;

const note = z.string().trim().max(2000, 'At most 2,000 characters.').nullable().optional();

/** A merge patch (RFC 7396); nothing of a runbook can be cleared. `note` says what was changed and why. */
export const runbookPatch = runbookInput.partial().extend({ note });
export type RunbookPatch = z.infer<typeof runbookPatch>;

/** Body of POST /runbooks/{slug}/review. */
export const reviewInput = z.object({
	action: z.enum(['submit', 'return', 'approve'], { error: 'The action is submit, return or approve.' }),
	note
});
export type ReviewInput = z.infer<typeof reviewInput>;

/** Body of POST /runbooks/{slug}/publish and /retire; it may be left out. */
export const moveInput = z.object({ note });
export type MoveInput = z.infer<typeof moveInput>;

const revisionNumber = z
	.number({ error: 'Give the number of a revision.' })
	.int('Give the number of a revision.')
	.positive('Give the number of a revision.');

/** Query of the comparison of two revisions. */
export const compareQuery = z.object({ from: revisionNumber, to: revisionNumber });
export type CompareQuery = z.infer<typeof compareQuery>;

/** What the preview of an unsaved text needs; nothing has to be complete. */
export const previewInput = z.object({
	body: runbookInput.shape.body.default(''),
	engines: z.array(z.enum(ENGINES)).default([])
});
export type PreviewInput = z.infer<typeof previewInput>;
