import { z } from 'zod';
import { can } from '$lib/domain/person/can';
import type { Actor } from '$lib/domain/person/person';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import type { Settings, SettingsPatch } from '$lib/domain/settings/settings';
import * as audit from '../audit/audit-service';
import { readSetting, writeSetting } from '../db/setting-store';
import { write } from '../db/transaction';
import { changedMeanwhile } from '../incidents/refusals';

const KEY = 'settings';
const kept = z.object({ evidenceDays: z.number().nullable(), revision: z.number() });
const UNSET: Settings = { evidenceDays: null, revision: 1 };

/** The settings as they stand, for the server's own work. */
export async function currentSettings(): Promise<Settings> {
	const value = await readSetting(KEY);
	return value === null ? UNSET : kept.parse(value);
}

function notAllowed() {
	return fail('forbidden', 'Only an administrator sees and changes the settings.');
}

/** The settings as they stand. */
export async function read(actor: Actor): Promise<Outcome<Settings>> {
	return can(actor, 'settings.manage') ? ok(await currentSettings()) : notAllowed();
}

/** Changes settings, based on a revision; what was and what is stands in the audit trail. */
export async function update(
	actor: Actor,
	revision: number,
	patch: SettingsPatch
): Promise<Outcome<Settings>> {
	if (!can(actor, 'settings.manage')) return notAllowed();
	return write(async (t): Promise<Outcome<Settings>> => {
		const before = await currentSettings();
		if (before.revision !== revision) return changedMeanwhile('The settings', revision, before);
		const evidenceDays = patch.evidenceDays === undefined ? before.evidenceDays : patch.evidenceDays;
		if (evidenceDays === before.evidenceDays) return ok(before);
		const after = { evidenceDays, revision: before.revision + 1 };
		await writeSetting(KEY, after);
		const detail = { setting: 'evidenceDays', from: before.evidenceDays, to: evidenceDays };
		await audit.record(actor, 'settings.update', 'settings:retention', detail, t);
		return ok(after);
	});
}
