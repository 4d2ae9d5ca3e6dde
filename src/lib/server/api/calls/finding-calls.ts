import { sizingInput } from '$lib/domain/sizing/sizing';
import type { Call } from '../call';
import { sizingShape } from '../shapes/finding';

/** What is worked out and found. */
export const FINDING_CALLS: readonly Call[] = [
	{
		method: 'post',
		path: '/sizing',
		id: 'computeSizing',
		summary: 'The memory that an operator needs, and what happens at the settings around the present one',
		group: 'sizing',
		body: { json: sizingInput, required: true },
		answer: { status: 200, what: 'The sizing.', shape: sizingShape }
	}
];
