import type { Attempt } from '$lib/domain/incident/attempt';
import type { Evidence } from '$lib/domain/incident/incident';
import * as attempts from '../incidents/attempts-service';
import * as incidents from '../incidents/incidents-service';
import type { DemoClock } from './demo-clock';
import type { DemoAttempt, DemoIncident } from './demo-content';
import { actorOf, valueOf, type FillContext } from './fill-incident';

type StepPatch = NonNullable<Parameters<typeof attempts.update>[4]['steps']>[number];

/** Ticks the steps evenly over the time that the attempt took; the way back is left where it worked. */
function tickSteps(told: DemoAttempt, started: Attempt, clock: DemoClock): StepPatch[] {
	const minutes = told.minutes ?? 10;
	const most = told.ticked ?? started.steps.length - 1;
	return started.steps.slice(0, most).map(({ number }, index): StepPatch => {
		const skipped = told.skipped.find(({ step }) => step === number);
		if (skipped !== undefined) return { number, skipped: skipped.why };
		return { number, tickedAt: clock.at(told.at + (minutes * (index + 1)) / (most + 1)) };
	});
}

async function fillAttempt(
	number: number,
	told: DemoAttempt,
	clock: DemoClock,
	context: FillContext,
	files: readonly Evidence[]
): Promise<void> {
	const actor = actorOf(context, told.by);
	const idOf = (name: string | undefined) => files.find((file) => file.name === name)?.id ?? null;
	const started = valueOf(
		await attempts.start(actor, number, {
			runbook: told.runbook ?? null,
			...(told.title === undefined ? {} : { title: told.title }),
			startedAt: clock.at(told.at),
			before: idOf(told.before)
		}),
		`attempt in ${number}`
	);
	const patch = {
		steps: tickSteps(told, started, clock),
		note: told.note,
		outcome: told.outcome,
		...(told.outcome === null
			? {}
			: { endedAt: clock.at(told.at + (told.minutes ?? 10)), after: idOf(told.after) })
	};
	valueOf(await attempts.update(actor, number, started.id, started.revision, patch), `attempt in ${number}`);
}

/** Makes the attempts of an incident, each ticked and ended as told. */
export async function fillAttempts(
	number: number,
	incident: DemoIncident,
	clock: DemoClock,
	context: FillContext
): Promise<void> {
	if (incident.attempts.length === 0) return;
	const { evidence } = valueOf(
		await incidents.read(actorOf(context, incident.loggedBy), number),
		incident.title
	);
	for (const told of incident.attempts) await fillAttempt(number, told, clock, context, evidence);
}
