import type { AuditLine } from '$lib/domain/audit/audit-line';

/** What was done, as it stands behind a name: "Ines Halvorsen gave another role to person 3". */
const WORDS: Record<string, string> = {
	'attempt.start': 'started an attempt',
	'attempt.update': 'changed an attempt',
	'entry.add': 'added an entry',
	'entry.update': 'corrected an entry',
	'evidence.attach': 'attached evidence',
	'evidence.claim': 'attached evidence that stood alone',
	'evidence.expire': 'removed a file whose time was up',
	'evidence.remove': 'removed evidence',
	'incident.create': 'logged an incident',
	'incident.update': 'changed an incident',
	'invitation.create': 'invited somebody',
	'invitation.resend': 'sent an invitation again',
	'invitation.revoke': 'took an invitation back',
	'person.add': 'added a person',
	'person.deactivate': 'closed an account',
	'person.first': 'became the first administrator',
	'person.join': 'joined by an invitation',
	'person.link': 'made a sign-in link',
	'person.password': 'set a password',
	'person.reactivate': 'opened an account again',
	'person.rename': 'changed a name',
	'person.reset-mailed': 'mailed a link for a new password',
	'person.role': 'gave another role',
	'person.sign-in': 'signed in',
	'runbook.adopt': 'took over a runbook that comes with Catchwater',
	'runbook.approve': 'approved a runbook',
	'runbook.create': 'drafted a runbook',
	'runbook.publish': 'published a runbook',
	'runbook.retire': 'retired a runbook',
	'runbook.return': 'returned a runbook to its author',
	'runbook.submit': 'submitted a runbook for review',
	'runbook.update': 'changed a runbook',
	'session.revoke': 'ended a sign-in',
	'settings.update': 'changed a setting',
	'token.create': 'made a token',
	'token.revoke': 'took a token back'
};

/** An action in words; one that has none is shown as it is. */
export function wordAction(action: string): string {
	return WORDS[action] ?? action;
}

/** "incident 412" for `incident:412`. */
export function wordSubject(subject: string): string {
	return subject.replace(':', ' ');
}

/** A page of this application. */
type Address = `/incidents/${string}` | `/people/${string}` | `/runbooks/${string}` | '/people' | '/settings';

/** Where the thing is to be seen; null: it has no page of its own, and belongs to no incident. */
export function addressOf({ subject, detail }: Pick<AuditLine, 'subject' | 'detail'>): Address | null {
	const [kind = '', id = ''] = subject.split(':');
	if (kind === 'incident') return `/incidents/${id}`;
	if (kind === 'person') return `/people/${id}`;
	if (kind === 'runbook') return `/runbooks/${id}`;
	if (kind === 'settings') return '/settings';
	if (kind === 'invitation') return '/people';
	const { incident } = detail;
	return typeof incident === 'number' ? `/incidents/${incident}` : null;
}

function wordValue(value: unknown): string {
	if (value === null || value === '') return 'none';
	if (typeof value === 'string') return value;
	return Array.isArray(value) ? value.map(wordValue).join(', ') : JSON.stringify(value);
}

/** "from reader, to curator" */
export function wordDetail(detail: Record<string, unknown>): string {
	return Object.entries(detail)
		.map(([name, value]) => `${name} ${wordValue(value)}`)
		.join(', ');
}

/** What can be chosen as an action: each group, then each action. */
export function actionOptions(actions: readonly string[]): { value: string; label: string }[] {
	const groups = [...new Set(actions.map((action) => action.split('.')[0] ?? action))];
	return groups.flatMap((group) => [
		{ value: group, label: `${group}: everything` },
		...actions
			.filter((action) => action.startsWith(`${group}.`))
			.map((action) => ({ value: action, label: `${group}: ${wordAction(action)}` }))
	]);
}
