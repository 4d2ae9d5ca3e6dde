import type { Permission } from '$lib/domain/person/permissions';

/** `open`: without signing in. */
export type Access = Permission | 'open';
export type Method = 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE';

/** Who may call a route, by method: a page's load is GET, its form actions are POST. */
export type RouteAccess = Partial<Record<Method, Access>> & {
	/** Form actions that need more than POST says, by name. */
	actions?: Record<string, Access>;
};

/**
 * Every route and who may call it, by route id (the folder under src/routes). What is not in here is refused:
 * a route without its row cannot be reached. The service behind it asks again, with the thing in hand.
 */
export const ROUTE_PERMISSIONS: Record<string, RouteAccess> = {
	'/(public)/first': { GET: 'open', POST: 'open' },
	'/(public)/forgotten': { GET: 'open', POST: 'open' },
	'/(public)/invitation/[token]': { GET: 'open', POST: 'open' },
	'/(public)/reset/[token]': { GET: 'open', POST: 'open' },
	'/(public)/sign-in': { GET: 'open', POST: 'open' },
	'/(public)/welcome/[token]': { GET: 'open', POST: 'open' },
	'/sign-out': { POST: 'account.own' },

	'/(app)': { GET: 'watch.read', actions: { take: 'incident.write' } },
	'/(app)/account': { GET: 'account.own', POST: 'account.own' },
	'/(app)/audit': { GET: 'audit.read' },
	'/(app)/audit/csv': { GET: 'audit.read' },
	// Draws the error of a page that a role doesn't open; says nothing of any other page.
	'/(app)/refused': { GET: 'account.own' },
	'/(app)/gauge': { GET: 'reading.make', POST: 'reading.make' },
	'/(app)/incidents': { GET: 'incident.read' },
	'/(app)/incidents/[number]': {
		GET: 'incident.read',
		POST: 'incident.write',
		actions: { removeEvidence: 'evidence.remove' }
	},
	'/(app)/incidents/new': { GET: 'incident.write', POST: 'incident.write' },
	'/(app)/outbox': { GET: 'mail.read' },
	'/(app)/outbox/[id]': { GET: 'mail.read' },
	'/(app)/people': { GET: 'people.manage', POST: 'people.manage' },
	'/(app)/people/[id]': { GET: 'people.manage', POST: 'people.manage' },
	'/(app)/runbooks': { GET: 'runbook.read' },
	'/(app)/runbooks/[slug]': {
		GET: 'runbook.read',
		actions: {
			start: 'attempt.write',
			submit: 'runbook.edit',
			return: 'runbook.edit',
			approve: 'runbook.publish',
			publish: 'runbook.publish',
			retire: 'runbook.publish'
		}
	},
	'/(app)/runbooks/[slug]/compare': { GET: 'runbook.read' },
	'/(app)/runbooks/[slug]/edit': { GET: 'runbook.edit', POST: 'runbook.edit' },
	'/(app)/runbooks/[slug]/follow': { GET: 'attempt.read', POST: 'attempt.write' },
	'/(app)/runbooks/[slug]/history': { GET: 'runbook.read' },
	'/(app)/runbooks/new': { GET: 'runbook.draft', POST: 'runbook.draft' },
	'/(app)/search': { GET: 'search.read' },
	'/(app)/settings': { GET: 'settings.manage', POST: 'settings.manage' },
	'/(app)/symptoms': { GET: 'symptom.read' },
	'/(app)/symptoms/[id]': { GET: 'symptom.read' },
	'/(app)/theme': { POST: 'account.own' },

	'/api/v1/audit': { GET: 'audit.read' },
	'/api/v1/cautions': { POST: 'reading.make' },
	'/api/v1/evidence': { POST: 'evidence.write' },
	'/api/v1/evidence/[sha256]': { GET: 'evidence.read' },
	'/api/v1/health': { GET: 'open' },
	'/api/v1/incidents': { GET: 'incident.read', POST: 'incident.write' },
	'/api/v1/incidents/[number]': { GET: 'incident.read', PATCH: 'incident.write' },
	'/api/v1/incidents/[number]/attempts': { GET: 'attempt.read', POST: 'attempt.write' },
	'/api/v1/incidents/[number]/attempts/[id]': { GET: 'attempt.read', PATCH: 'attempt.write' },
	'/api/v1/incidents/[number]/entries': { GET: 'entry.read', POST: 'entry.write' },
	'/api/v1/incidents/[number]/entries/[id]': { GET: 'entry.read', PATCH: 'entry.write' },
	'/api/v1/incidents/[number]/evidence': { POST: 'evidence.write' },
	'/api/v1/incidents/[number]/evidence/[id]': { DELETE: 'evidence.remove' },
	'/api/v1/incidents/[number]/precedents': { GET: 'precedent.read' },
	'/api/v1/invitations': { GET: 'people.manage', POST: 'people.manage' },
	'/api/v1/invitations/[id]': { GET: 'people.manage', DELETE: 'people.manage' },
	'/api/v1/invitations/[id]/resend': { POST: 'people.manage' },
	'/api/v1/openapi.json': { GET: 'open' },
	'/api/v1/people': { GET: 'people.manage' },
	'/api/v1/people/[id]': { GET: 'people.manage', PATCH: 'people.manage' },
	'/api/v1/precedents': { POST: 'reading.make' },
	'/api/v1/readings': { POST: 'reading.make' },
	'/api/v1/readings/compare': { POST: 'reading.make' },
	'/api/v1/search': { GET: 'search.read' },
	'/api/v1/runbooks': { GET: 'runbook.read', POST: 'runbook.draft' },
	'/api/v1/runbooks/[slug]': { GET: 'runbook.read', PATCH: 'runbook.edit' },
	'/api/v1/runbooks/[slug]/compare': { GET: 'runbook.read' },
	'/api/v1/runbooks/[slug]/publish': { POST: 'runbook.publish' },
	'/api/v1/runbooks/[slug]/retire': { POST: 'runbook.publish' },
	'/api/v1/runbooks/[slug]/review': { POST: 'runbook.edit' },
	'/api/v1/runbooks/[slug]/revisions': { GET: 'runbook.read' },
	'/api/v1/runbooks/[slug]/revisions/[n]': { GET: 'runbook.read' },
	'/api/v1/settings': { GET: 'settings.manage', PATCH: 'settings.manage' },
	'/api/v1/sizing': { POST: 'reading.make' },
	'/api/v1/symptoms': { GET: 'symptom.read' },
	'/api/v1/symptoms/[id]': { GET: 'symptom.read' },
	'/api/v1/tokens': { GET: 'account.own', POST: 'account.own' },
	'/api/v1/tokens/[id]': { GET: 'account.own', DELETE: 'account.own' },
	'/api/v1/watch': { GET: 'watch.read' }
};

/** What a call needs; null where the route or the method is not in the table. */
export function findAccess(routeId: string, method: string, actionName: string | null): Access | null {
	const row = ROUTE_PERMISSIONS[routeId];
	if (!row) return null;
	const actions = row.actions ?? {};
	// The name comes out of the address: `constructor` must find nothing.
	const isNamed = method === 'POST' && actionName !== null && Object.hasOwn(actions, actionName);
	const named = isNamed ? actions[actionName] : undefined;
	return named ?? row[toMethod(method)] ?? null;
}

/** The methods of a route, as `Allow` lists them. */
export function listMethods(routeId: string): string[] {
	const { actions, ...methods } = ROUTE_PERMISSIONS[routeId] ?? {};
	const names = [...new Set([...Object.keys(methods), ...(actions ? ['POST'] : [])])];
	return names.includes('GET') ? ['HEAD', ...names] : names;
}

/** HEAD is allowed wherever GET is. Any other word finds no row. */
function toMethod(method: string): Method {
	return (method === 'HEAD' ? 'GET' : method) as Method;
}
