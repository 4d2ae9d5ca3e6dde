import { auditQuery } from '$lib/domain/audit/audit-query';
import { pageQuery } from '$lib/domain/incident/incident-filter';
import { invitationInput, personPatch, tokenInput } from '$lib/domain/person/person-input';
import { peopleQuery, tokenQuery } from '$lib/domain/person/people-query';
import { settingsPatch } from '$lib/domain/settings/settings';
import type { Call } from '../call';
import { pageOf } from '../shapes/page';
import {
	auditLineShape,
	invitationShape,
	madeTokenShape,
	personDetailShape,
	settingsShape,
	tokenShape
} from '../shapes/people';

const people = 'people';
const invitations = 'invitations';
const tokens = 'tokens';
const installation = 'installation';

/** Who is here, by what they get in, what is set, and who did what. */
export const PEOPLE_CALLS: readonly Call[] = [
	{
		method: 'get',
		path: '/people',
		id: 'listPeople',
		summary: 'People by name, those who left last: administrators',
		group: people,
		query: peopleQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(personDetailShape), headers: ['link'] }
	},
	{
		method: 'get',
		path: '/people/{id}',
		id: 'readPerson',
		summary: 'One person: administrators',
		group: people,
		answer: { status: 200, what: 'The person.', shape: personDetailShape, headers: ['etag'] }
	},
	{
		method: 'patch',
		path: '/people/{id}',
		id: 'changePerson',
		summary: 'Rename somebody, give another role, close or open the account: administrators',
		group: people,
		body: { mergePatch: personPatch, required: true },
		answer: { status: 200, what: 'The person.', shape: personDetailShape, headers: ['etag'] },
		problems: ['refused']
	},
	{
		method: 'get',
		path: '/invitations',
		id: 'listInvitations',
		summary: 'Invitations, newest first: administrators',
		group: invitations,
		query: pageQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(invitationShape), headers: ['link'] }
	},
	{
		method: 'post',
		path: '/invitations',
		id: 'invite',
		summary: 'Invite somebody by mail: administrators',
		group: invitations,
		body: { json: invitationInput, required: true },
		answer: { status: 201, what: 'The invitation.', shape: invitationShape, headers: ['location', 'etag'] }
	},
	{
		method: 'get',
		path: '/invitations/{id}',
		id: 'readInvitation',
		summary: 'One invitation: administrators',
		group: invitations,
		answer: { status: 200, what: 'The invitation.', shape: invitationShape, headers: ['etag'] }
	},
	{
		method: 'delete',
		path: '/invitations/{id}',
		id: 'revokeInvitation',
		summary: 'Take an invitation back: administrators',
		group: invitations,
		answer: { status: 204, what: 'Its link opens no more.' },
		problems: ['refused']
	},
	{
		method: 'post',
		path: '/invitations/{id}/resend',
		id: 'resendInvitation',
		summary: 'Mail a new link, good for its full time; the one before opens no more: administrators',
		group: invitations,
		answer: { status: 200, what: 'The invitation.', shape: invitationShape, headers: ['etag'] }
	},
	{
		method: 'get',
		path: '/tokens',
		id: 'listTokens',
		summary: "One's own tokens, newest first; a person's for administrators",
		group: tokens,
		query: tokenQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(tokenShape), headers: ['link'] }
	},
	{
		method: 'post',
		path: '/tokens',
		id: 'makeToken',
		summary: 'Make a token for oneself',
		group: tokens,
		body: { json: tokenInput, required: true },
		answer: { status: 201, what: 'The token, shown this once.', shape: madeTokenShape, headers: ['location'] }
	},
	{
		method: 'get',
		path: '/tokens/{id}',
		id: 'readToken',
		summary: "One of one's own tokens; anybody's for administrators",
		group: tokens,
		answer: { status: 200, what: 'What is known of it.', shape: tokenShape }
	},
	{
		method: 'delete',
		path: '/tokens/{id}',
		id: 'revokeToken',
		summary: "Take one of one's own tokens back; anybody's for administrators",
		group: tokens,
		answer: { status: 204, what: 'It opens no more.' }
	},
	{
		method: 'get',
		path: '/settings',
		id: 'readSettings',
		summary: 'What is set for the whole installation: administrators',
		group: installation,
		answer: { status: 200, what: 'The settings.', shape: settingsShape, headers: ['etag'] }
	},
	{
		method: 'patch',
		path: '/settings',
		id: 'changeSettings',
		summary: 'Change settings: administrators',
		group: installation,
		body: { mergePatch: settingsPatch, required: true },
		answer: { status: 200, what: 'The settings.', shape: settingsShape, headers: ['etag'] }
	},
	{
		method: 'get',
		path: '/audit',
		id: 'readAudit',
		summary: 'Who did what, newest first: administrators',
		group: installation,
		query: auditQuery,
		answer: { status: 200, what: 'A page.', shape: pageOf(auditLineShape), headers: ['link'] }
	}
];
